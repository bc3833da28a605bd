/** What of a conjugated bond depends on temperature, read from its stored profile. */
import {
  basinPopulations,
  createPeriodicCurve,
  overlapAt,
  profileAverage,
  type PeriodicCurve,
} from '../engine/light';

/** One angle of the profile: energy in kcal/mol, twist in degrees. */
export interface ConjugationSample {
  readonly angle: number;
  readonly relative: number;
  readonly twist: number;
}

/** The overlap cos²(twist) along the turn, 0 to 1. */
export function overlapAlong(profile: readonly ConjugationSample[]): PeriodicCurve {
  return createPeriodicCurve(
    profile.map(({ angle }) => angle),
    profile.map(({ twist }) => overlapAt(twist)),
  );
}

/**
 * Share of |angle| < 90 and population average of the overlap at a temperature in K. Whether the share means anything
 * (whether 0 degrees is s-cis) is for the caller to know.
 */
export function conjugationAt(
  profile: readonly ConjugationSample[],
  temperature: number,
): { readonly sCisFraction: number; readonly meanOverlap: number } {
  const energy = createPeriodicCurve(
    profile.map(({ angle }) => angle),
    profile.map(({ relative }) => relative),
  );
  const overlap = overlapAlong(profile);
  return {
    sCisFraction: basinPopulations(energy, [-90, 90], temperature)[0],
    meanOverlap: profileAverage(energy, (angle) => overlap.at(angle), temperature),
  };
}
