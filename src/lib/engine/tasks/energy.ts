/** The energy of a geometry as it is, by terms. */
import type { Control } from '../control';
import type { InputWarning } from '../errors';
import { rootMeanSquare } from '../minimizer/minimize';
import type { ForceField } from '../forcefield/forcefield';
import {
  builtGeometry,
  geometryBuilt,
  givenGeometry,
  minimizeTightly,
  notConverged,
} from './prepare';
import type { EnergyFields, Outcome } from './result';

/** Evaluates the geometry given; without one, some minimum is built first, and a warning says so. */
export async function computeEnergy(
  forceField: ForceField,
  control: Control,
): Promise<Outcome<EnergyFields>> {
  const warnings: InputWarning[] = [];
  let x = givenGeometry(forceField);
  if (!x) {
    x = await builtGeometry(forceField, control);
    const { converged } = await minimizeTightly(forceField, x, control);
    warnings.push(geometryBuilt('the energy is that of a minimum built for it'));
    if (!converged) warnings.push(notConverged('The minimization of the built geometry'));
  }
  const gradient = new Float64Array(x.length);
  const energy = forceField.energy(x, gradient);
  return {
    fields: {
      energy,
      terms: forceField.terms(x),
      atomTypes: Array.from(forceField.atomTypes),
      charges: Array.from(forceField.charges),
      gradientRms: rootMeanSquare(gradient),
    },
    coordinates: x,
    warnings,
  };
}
