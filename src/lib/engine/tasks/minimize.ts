/** The minimum a geometry leads down to. */
import type { Control } from '../control';
import type { InputWarning } from '../errors';
import type { ForceField } from '../forcefield/forcefield';
import {
  builtGeometry,
  geometryBuilt,
  givenGeometry,
  minimizeTightly,
  notConverged,
} from './prepare';
import type { MinimizeFields, Outcome } from './result';

/** Minimizes the geometry given; without one, a geometry is built to start from, and a warning says so. */
export async function minimizeGeometry(
  forceField: ForceField,
  control: Control,
): Promise<Outcome<MinimizeFields>> {
  const warnings: InputWarning[] = [];
  let x = givenGeometry(forceField);
  if (!x) {
    x = await builtGeometry(forceField, control);
    warnings.push(geometryBuilt('the minimization starts from one built for it'));
  }
  const { energy, converged, gradientRms, evaluations } = await minimizeTightly(
    forceField,
    x,
    control,
  );
  if (!converged) warnings.push(notConverged('The minimization'));
  return {
    fields: { energy, converged, gradientRms, evaluations },
    coordinates: x,
    warnings,
  };
}
