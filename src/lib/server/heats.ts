/** Heats of formation by PM7: asked for, handed to workers, stored. */
import { heatSettingsSchema, PM7, type HeatSettings } from '../domain/second-opinions';
import { ENGINE_VERSION, writeMolfile, type Molecule, type MoleculeInput } from '../engine';
import type { Member } from './member';
import { readStored } from './molecules';
import { ask, type ProgramTask } from './program-tasks';
import { storeAnswer } from './results';
import type { ClaimedTask } from './tasks';

/** Asks for the heat of formation of a molecule. */
export function request(
  member: Member,
  moleculeId: string,
  settings: HeatSettings,
): Promise<ProgramTask> {
  return ask(member, { moleculeId, kind: 'heat', settings });
}

/** A molecule as the worker takes it. */
export interface HeatSubject {
  readonly settings: HeatSettings;
  readonly input: MoleculeInput;
  readonly molecule: Molecule;
}

/** The molecule that a task is about. */
export function subjectOf(task: ClaimedTask): HeatSubject {
  const { format, structure } = task;
  return {
    settings: heatSettingsSchema.parse(task.settings),
    input: format === 'smiles' ? { smiles: structure } : { molfile: structure },
    molecule: readStored(task),
  };
}

export interface HeatOutcome {
  /** Heat of formation at 298 K, kcal/mol, and its geometry; null where no conformer converged. */
  readonly lowest: { readonly energy: number; readonly coordinates: Float64Array } | null;
  /** Conformers that PM7 was given. */
  readonly tried: number;
  /** Why conformers gave no number. */
  readonly gaps: readonly string[];
  /** The program and its version: "mopac 22.0.6". */
  readonly program: string;
  readonly seconds: number;
}

/** Stores a heat and marks the task done. */
export function store(
  task: ClaimedTask,
  { molecule }: HeatSubject,
  { tried, gaps, program, seconds }: HeatOutcome,
  lowest: NonNullable<HeatOutcome['lowest']>,
): Promise<boolean> {
  return storeAnswer(task, {
    engineVersion: ENGINE_VERSION,
    model: PM7,
    molfile: writeMolfile(molecule, lowest.coordinates),
    details: { heatOfFormation: lowest.energy, tried, gaps, program },
    warnings: [],
    seconds,
    rows: () => Promise.resolve(),
  });
}
