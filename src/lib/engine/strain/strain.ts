/** What is asked about the strain of a geometry and what is answered. */
import type { TermEnergies } from '../forcefield/forcefield';
import type { TorsionAtoms } from '../torsion/scan-symmetry';
import type { RelaxedInPlace } from './relax-in-place';

export interface StrainOptions {
  /** How far a heavy atom may move at no cost, Å. */
  readonly tether: number;
  readonly seed: number;
}

/** One angle of a fragment's profile. */
export interface StrainPoint {
  readonly angle: number;
  /** kcal/mol above the profile's lowest point. */
  readonly relative: number;
}

/** What one bond's torsion angle costs. */
export interface TorsionStrain {
  readonly bond: readonly [number, number];
  readonly torsion: TorsionAtoms;
  /** In the geometry relaxed in place, degrees. */
  readonly angle: number;
  /** Energy of the fragment's profile at the angle above its lowest point, kcal/mol. */
  readonly strain: number;
  /** Where the fragment's profile is lowest, degrees; of equally low angles the one nearest to the geometry's. */
  readonly preferredAngle: number;
  /** The fragment's profile with its stationary points, ascending in angle. */
  readonly profile: readonly StrainPoint[];
  /** False when time ran out before the fragment's profile was through. */
  readonly complete: boolean;
}

export interface StrainResult {
  /** Energy of the geometry relaxed in place above the lowest conformer, kcal/mol; never negative. */
  readonly strain: number;
  /** The same by terms; they sum to the strain. */
  readonly strainTerms: TermEnergies;
  /** Energy of the geometry exactly as given, kcal/mol. */
  readonly givenEnergy: number;
  readonly relaxed: RelaxedInPlace;
  readonly lowest: { readonly coordinates: Float64Array; readonly energy: number };
  /** Most strained first; bonds that time did not suffice for are missing. */
  readonly torsions: readonly TorsionStrain[];
  readonly complete: boolean;
}
