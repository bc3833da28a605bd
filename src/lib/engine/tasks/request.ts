/** What the engine is asked: a molecule and one task, every setting given. Energies kcal/mol, angles degrees, atoms from 0. */
import type { SearchEffort } from '../conformers/conformers';
import type { ForceFieldSettings } from '../forcefield/forcefield';
import type { MoleculeInput } from '../molecule/read';

export interface EnergyTask extends ForceFieldSettings {
  readonly kind: 'energy';
}

export interface MinimizeTask extends ForceFieldSettings {
  readonly kind: 'minimize';
}

export interface ConformersTask extends ForceFieldSettings {
  readonly kind: 'conformers';
  /** Most conformers returned. */
  readonly limit: number;
  /** Highest energy above the lowest, kcal/mol. */
  readonly window: number;
  readonly temperature: number;
  readonly seed: number;
  readonly effort: SearchEffort;
}

/** Either the torsion or the bond is given. */
export interface ScanTask extends ForceFieldSettings {
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

export interface MapTask extends ForceFieldSettings {
  readonly kind: 'map';
  /** Two torsions about different bonds. */
  readonly torsions: readonly [
    readonly [number, number, number, number],
    readonly [number, number, number, number],
  ];
  /** Degrees between two cells; divides 360. */
  readonly step: number;
  readonly seed: number;
}

export interface ConjugationTask extends ForceFieldSettings {
  readonly kind: 'conjugation';
  readonly temperature: number;
  readonly seed: number;
}

export interface StrainTask extends ForceFieldSettings {
  readonly kind: 'strain';
  /** How far a heavy atom may move at no cost, Å. */
  readonly tether: number;
  readonly seed: number;
}

export type Task =
  EnergyTask | MinimizeTask | ConformersTask | ScanTask | MapTask | ConjugationTask | StrainTask;
export type TaskKind = Task['kind'];
export type TaskOf<Kind extends TaskKind> = Extract<Task, { readonly kind: Kind }>;

export interface Request<Kind extends TaskKind = TaskKind> {
  readonly molecule: MoleculeInput;
  readonly task: TaskOf<Kind>;
}
