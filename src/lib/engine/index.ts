/** What the rest of the program may use of the engine. */
export { InputError } from './errors';
export type { InputErrorCode, InputPlace, InputWarning, InputWarningCode } from './errors';
export { drawMolecule } from './molecule/drawing';
export type { Drawing } from './molecule/drawing';
export { molecularFormula } from './molecule/identity';
export { readMolecule } from './molecule/read';
export type { MoleculeInput } from './molecule/read';
export type { Molecule } from './molecule/molecule';
export { hasResources, registerResources } from './molecule/resources';
export { rotatableBonds } from './molecule/rotatable';
export type { RotatableBond } from './molecule/rotatable';
export { writeMolfile, writeSdf } from './molecule/write';
export type { SdfRecord } from './molecule/write';
export { perform } from './run';
export type { PerformOptions } from './run';
export type { Request, Task, TaskKind, TaskOf } from './tasks/request';
export type { FieldsByKind, Provenance, Result } from './tasks/result';
export { ENGINE_VERSION } from './version';
