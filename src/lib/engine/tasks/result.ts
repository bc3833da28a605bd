/** What the engine answers. Energies kcal/mol, angles degrees, atoms from 0, geometries as molfiles. */
import type { InputWarning } from '../errors';
import type { TermEnergies, Variant } from '../forcefield/forcefield';
import type { Task } from './request';

/** What is needed to get the same numbers again, and how long it took. */
export interface Provenance {
  readonly version: string;
  readonly model: Variant;
  /** The task with every default filled in. */
  readonly settings: Task;
  readonly seconds: number;
}

/** What every result carries. */
export interface CommonResult {
  /** The prepared molecule in its final atom order; the geometry is the task's main one. */
  readonly molfile: string;
  /** Canonical isomeric SMILES. */
  readonly smiles: string;
  readonly warnings: readonly InputWarning[];
  readonly provenance: Provenance;
}

/** What a task hands to the front door: its own fields, and what goes into the common ones. */
export interface Outcome<Fields> {
  readonly fields: Fields;
  /** Å, 3N: the geometry of the result's molfile. */
  readonly coordinates: Float64Array;
  readonly warnings: readonly InputWarning[];
}

export interface EnergyFields {
  readonly energy: number;
  readonly terms: TermEnergies;
  readonly atomTypes: readonly number[];
  /** Electron charges. */
  readonly charges: readonly number[];
  /** kcal/mol/Å */
  readonly gradientRms: number;
}

export interface MinimizeFields {
  readonly energy: number;
  readonly converged: boolean;
  readonly gradientRms: number;
  readonly evaluations: number;
}
