/** Free energies of the shapes of one molecule beside each other, and why one may be missing. */
import { boltzmannPopulations } from './boltzmann';
import { thermochemistry } from './free-energy';
import type { Vibrations } from './free-energy';

/** Shapes higher than this above the lowest are left out, kcal/mol: at 25 °C one would hold 0.1 % of the lowest's share. */
export const FREE_ENERGY_WINDOW = 4;

/**
 * Why a shape has no free energy:
 * - left-out: too high above the lowest to matter
 * - no-time: the time was over
 * - not-a-minimum, not-a-saddle: the number of imaginary frequencies is not 0, or not 1
 * - not-refined: no saddle was reached from the top of the profile
 * - not-the-torsion: the ways down from the saddle do not lead to the minima on its two sides
 */
export type FreeEnergyFlaw =
  'left-out' | 'no-time' | 'not-a-minimum' | 'not-a-saddle' | 'not-refined' | 'not-the-torsion';

export interface VibrationalAnalysis {
  /** Null where none were computed. */
  readonly modes: Vibrations | null;
  /** Null where a free energy can be given. */
  readonly flaw: FreeEnergyFlaw | null;
  /**
   * How far the saddle lies above the top of the profile, kcal/mol, where that is more than rounding: a relaxed profile shows the
   * lowest arrangement of the rest at every angle, and the way from one to another may be higher. Free energies take it in.
   */
  readonly rise?: number;
}

/** A shape with its model energy in kcal/mol, from any zero common to all; old results have no analysis. */
export interface Shape {
  readonly energy: number;
  readonly vibrations?: VibrationalAnalysis | null | undefined;
}

/** Free energies G in kcal/mol at a temperature in K, from the zero of the energies; null where there is none. */
export function freeEnergies(shapes: readonly Shape[], temperature: number): (number | null)[] {
  return shapes.map(({ energy, vibrations }) =>
    vibrations?.modes && vibrations.flaw === null
      ? energy + (vibrations.rise ?? 0) + thermochemistry(vibrations.modes, temperature).freeEnergy
      : null,
  );
}

/** The same above the lowest of them. */
export function relativeFreeEnergies(
  shapes: readonly Shape[],
  temperature: number,
): (number | null)[] {
  const energies = freeEnergies(shapes, temperature);
  const lowest = Math.min(...energies.filter((energy) => energy !== null));
  return energies.map((energy) => (energy === null ? null : energy - lowest));
}

/**
 * Populations g exp(-G/RT) / Σ g exp(-G/RT) at a temperature in K, null for shapes that were left out. Null as a whole where no
 * shape has a free energy, or where one that may matter has none: shares of an unknown whole would be made up.
 */
export function freePopulations(
  shapes: readonly (Shape & { readonly degeneracy: number })[],
  temperature: number,
): (number | null)[] | null {
  const energies = freeEnergies(shapes, temperature);
  const known = energies.flatMap((value, n) => (value === null ? [] : [n]));
  const isOpen = ({ vibrations }: Shape): boolean =>
    !vibrations || (vibrations.flaw !== null && vibrations.flaw !== 'left-out');
  if (known.length === 0 || shapes.some(isOpen)) return null;
  const shares = boltzmannPopulations(
    known.map((n) => energies[n]!),
    known.map((n) => shapes[n].degeneracy),
    temperature,
  );
  const populations: (number | null)[] = shapes.map(() => null);
  known.forEach((n, place) => (populations[n] = shares[place]));
  return populations;
}
