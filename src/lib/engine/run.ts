/** The front door of the computation: one request in, one result out. */
import { createControl } from './control';
import type { Control, ControlOptions } from './control';
import { createForceField } from './forcefield/create';
import type { ForceField } from './forcefield/forcefield';
import { readMolecule } from './molecule/read';
import { writeMolfile } from './molecule/write';
import { searchForConformers } from './tasks/conformers';
import { describeConjugation } from './tasks/conjugation';
import { computeEnergy } from './tasks/energy';
import { mapBonds } from './tasks/map';
import { minimizeGeometry } from './tasks/minimize';
import type { Request, Task, TaskKind } from './tasks/request';
import type { Fields, FieldsByKind, Outcome, Provenance, Result } from './tasks/result';
import { scanBond } from './tasks/scan';
import { measureStrain } from './tasks/strain';
import { ENGINE_VERSION } from './version';

export interface PerformOptions extends ControlOptions {
  /** The version written into the result; that of the engine unless the program has one of its own. */
  readonly version?: string | undefined;
}

/**
 * Performs one task on one molecule. The same request gives the same numbers, the time taken aside, unless a budget
 * cut the work short. Throws InputError for what a person can mend, and the signal's reason when aborted.
 */
export async function perform<Kind extends TaskKind>(
  request: Request<Kind>,
  options: PerformOptions,
): Promise<Result<Kind>> {
  const start = options.now();
  options.signal?.throwIfAborted();
  const task: Task = request.task;
  const control = createControl(options);
  const molecule = readMolecule(request.molecule);
  const forceField = createForceField(molecule, task);
  // The compiler cannot follow the kind through the switch; runTask answers each kind with its own fields.
  const outcome = (await runTask(forceField, task, control)) as Outcome<FieldsByKind[Kind]>;
  control.report(1, 'done');
  const provenance: Provenance = {
    version: options.version ?? ENGINE_VERSION,
    model: task.variant,
    settings: task,
    seconds: Math.round(options.now() - start) / 1000,
  };
  return {
    ...outcome.fields,
    molfile: writeMolfile(molecule, outcome.coordinates),
    smiles: molecule.smiles,
    warnings: [...molecule.warnings, ...outcome.warnings],
    provenance,
  };
}

function runTask(forceField: ForceField, task: Task, control: Control): Promise<Outcome<Fields>> {
  switch (task.kind) {
    case 'energy':
      return computeEnergy(forceField, control);
    case 'minimize':
      return minimizeGeometry(forceField, control);
    case 'conformers':
      return searchForConformers(forceField, task, control);
    case 'scan':
      return scanBond(forceField, task, control);
    case 'map':
      return mapBonds(forceField, task, control);
    case 'conjugation':
      return describeConjugation(forceField, task, control);
    case 'strain':
      return measureStrain(forceField, task, control);
  }
}
