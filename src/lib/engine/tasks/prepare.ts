/** What every task begins with: a geometry, and the remarks that go with it. */
import type { Control } from '../control';
import { initialGeometry } from '../conformers/initial-geometry';
import type { InputWarning } from '../errors';
import type { ForceField } from '../forcefield/forcefield';
import { minimizeToMinimum } from '../minimizer/minimize-to-minimum';
import type { MinimumResult } from '../minimizer/minimize-to-minimum';
import { REPORTED_GRADIENT_RMS } from '../minimizer/minimizer';

/** Energy evaluations after which a minimization gives up; a molecule of 200 atoms needs a few hundred. */
export const MAX_EVALUATIONS = 20_000;

/** Where a geometry must be built, it is always the same one. */
const BUILDING_SEED = 1;

/** The geometry a molecule came with; null where it had none. Free to be changed by the caller. */
export function givenGeometry(forceField: ForceField): Float64Array | null {
  const { coordinates } = forceField.molecule;
  return coordinates && Float64Array.from(coordinates);
}

/** Builds a geometry from the graph. It wants minimizing before anything is read from it. */
export function builtGeometry(forceField: ForceField, control: Control): Promise<Float64Array> {
  return initialGeometry(forceField.molecule, BUILDING_SEED, control);
}

/** Minimizes in place as tightly as reported minima must be, leaving saddles behind. */
export function minimizeTightly(
  { energy, curvature }: ForceField,
  x: Float64Array,
  control: Control,
): Promise<MinimumResult> {
  const options = {
    gradientRms: REPORTED_GRADIENT_RMS,
    maxEvaluations: MAX_EVALUATIONS,
    curvature,
  };
  return minimizeToMinimum(energy, x, options, control);
}

export function geometryBuilt(what: string): InputWarning {
  return { code: 'geometry-built', message: `The input has no 3-D geometry; ${what}.` };
}

export function notConverged(what: string): InputWarning {
  return { code: 'not-converged', message: `${what} did not converge; take it with care.` };
}

export const incompleteSearch: InputWarning = {
  code: 'incomplete-search',
  message:
    'The search ended before its result stopped changing; lower or further shapes may exist.',
};
