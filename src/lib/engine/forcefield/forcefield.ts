/** A molecule's force field: MMFF94 or MMFF94s compiled into flat arrays, as one energy term and by its parts. */
import type { CurvatureTerm, EnergyTerm } from '../energy-term';
import type { Molecule } from '../molecule/molecule';
import type { Skeleton } from '../molecule/skeleton';

export type Variant = 'MMFF94' | 'MMFF94s';

/** How charges are screened: by a constant, or by constant times distance in Å. */
export interface Dielectric {
  readonly constant: number;
  readonly distanceDependent: boolean;
}

export interface ForceFieldSettings {
  readonly variant: Variant;
  readonly dielectric: Dielectric;
}

/** MMFF94s in vacuum. */
export const defaultForceFieldSettings: ForceFieldSettings = {
  variant: 'MMFF94s',
  dielectric: { constant: 1, distanceDependent: false },
};

/** Energies by term, kcal/mol. */
export interface TermEnergies {
  readonly bond: number;
  readonly angle: number;
  readonly stretchBend: number;
  readonly outOfPlane: number;
  readonly torsion: number;
  readonly vanDerWaals: number;
  readonly electrostatic: number;
}

export interface ForceField {
  readonly molecule: Molecule;
  readonly settings: ForceFieldSettings;
  /** MMFF94 numeric atom types, one an atom. */
  readonly atomTypes: Readonly<Int32Array>;
  /** Partial charges in electron charges, one an atom. */
  readonly charges: Readonly<Float64Array>;
  /** The whole energy with its gradient. */
  readonly energy: EnergyTerm;
  /** A cheap positive semidefinite curvature of the whole energy, for the minimizer. */
  readonly curvature: CurvatureTerm;
  /** The molecule's bonds as the minimizer needs them. */
  readonly skeleton: Skeleton;
  /** The energy by terms. */
  terms(x: Float64Array): TermEnergies;
}
