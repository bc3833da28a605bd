/** The minimum of the unrestrained energy below a geometry. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { minimizeToMinimum } from '../minimizer/minimize-to-minimum';
import { REPORTED_GRADIENT_RMS } from '../minimizer/minimizer';

export interface FreeMinimum {
  /** 3N, Å */
  readonly coordinates: Float64Array;
  /** kcal/mol */
  readonly energy: number;
  readonly converged: boolean;
}

const MAX_EVALUATIONS = 2000;

/** Minimizes a copy of a geometry (Å, 3N) to a true minimum; null when it does not converge to one. */
export async function minimizeFreely(
  { energy: energyTerm, curvature, skeleton }: ForceField,
  start: Float64Array,
  control: Control,
): Promise<FreeMinimum | null> {
  const coordinates = start.slice();
  const options = {
    gradientRms: REPORTED_GRADIENT_RMS,
    maxEvaluations: MAX_EVALUATIONS,
    curvature,
    skeleton,
  };
  const { energy, converged } = await minimizeToMinimum(energyTerm, coordinates, options, control);
  return converged ? { coordinates, energy, converged } : null;
}
