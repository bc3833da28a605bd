/** What the engine is asked: a molecule and one task, every setting given. Energies kcal/mol, angles degrees, atoms from 0. */
import type { Dielectric, Variant } from '../forcefield/forcefield';

export type MoleculeInput = { readonly smiles: string } | { readonly molfile: string };

/** The energy model. */
export interface ModelSettings {
  readonly variant: Variant;
  readonly dielectric: Dielectric;
}

export interface EnergyTask extends ModelSettings {
  readonly kind: 'energy';
}

export interface MinimizeTask extends ModelSettings {
  readonly kind: 'minimize';
}

export interface ConformersTask extends ModelSettings {
  readonly kind: 'conformers';
  /** Most conformers returned. */
  readonly limit: number;
  /** Highest energy above the lowest, kcal/mol. */
  readonly window: number;
  readonly temperature: number;
  readonly seed: number;
  readonly effort: 'quick' | 'normal' | 'thorough';
}

/** Either the torsion or the bond is given. */
export interface ScanTask extends ModelSettings {
  readonly kind: 'scan';
  readonly torsion?: readonly [number, number, number, number] | undefined;
  readonly bond?: readonly [number, number] | undefined;
  /** Degrees between two points of the grid; divides 360. */
  readonly step: number;
  /** Whether all else relaxes at every angle. */
  readonly relaxed: boolean;
  readonly temperature: number;
  readonly seed: number;
}

export interface ConjugationTask extends ModelSettings {
  readonly kind: 'conjugation';
  readonly temperature: number;
  readonly seed: number;
}

export interface StrainTask extends ModelSettings {
  readonly kind: 'strain';
  /** How far a heavy atom may move at no cost, Å. */
  readonly tether: number;
  readonly seed: number;
}

export type Task =
  EnergyTask | MinimizeTask | ConformersTask | ScanTask | ConjugationTask | StrainTask;

export interface Request {
  readonly molecule: MoleculeInput;
  readonly task: Task;
}
