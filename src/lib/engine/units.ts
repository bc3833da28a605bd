/** Units and constants. Inside the engine: kcal/mol, Å, degrees at every public border, K, s. */

/** Thermochemical calorie, exact by definition: 1 kcal = 4.184 kJ. */
export const KJ_PER_KCAL = 4.184;
/** Molar gas constant, 8.314462618 J/(mol K) (CODATA 2018, exact), in kcal/(mol K). */
export const GAS_CONSTANT = 8.314462618e-3 / KJ_PER_KCAL;
/** Planck constant, J s, and Boltzmann constant, J/K (CODATA 2018, both exact). */
export const PLANCK = 6.62607015e-34;
export const BOLTZMANN = 1.380649e-23;
/** Boltzmann constant over Planck constant, 1/(K s). */
export const BOLTZMANN_OVER_PLANCK = BOLTZMANN / PLANCK;
/** Avogadro constant, 1/mol (CODATA 2018, exact). */
export const AVOGADRO = 6.02214076e23;
/** Speed of light in the unit of wavenumbers, cm/s (exact). */
export const SPEED_OF_LIGHT = 2.99792458e10;
/** Standard room temperature in K. */
export const ROOM_TEMPERATURE = 298.15;

const DEGREES_PER_RADIAN = 180 / Math.PI;

/** Radians to degrees. */
export function toDegrees(radians: number): number {
  return radians * DEGREES_PER_RADIAN;
}

/** Degrees to radians. */
export function toRadians(degrees: number): number {
  return degrees / DEGREES_PER_RADIAN;
}

/** Any angle in degrees, brought into (-180, 180]. */
export function wrapDegrees(angle: number): number {
  const turned = angle - 360 * Math.floor((angle + 180) / 360);
  return turned <= -180 ? turned + 360 : turned;
}

/** Signed shortest turn from one angle to another, degrees in (-180, 180]. */
export function turnBetween(from: number, to: number): number {
  return wrapDegrees(to - from);
}
