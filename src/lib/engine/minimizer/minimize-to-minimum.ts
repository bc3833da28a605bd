/** Minimization that does not stop at saddles. */
import type { Control } from '../control';
import type { EnergyTerm } from '../energy-term';
import { minimize } from './minimize';
import type { MinimizeOptions, MinimizeResult } from './minimizer';
import { softestMode } from './stationary';

/** A curvature below this is a saddle's and not rounding, kcal/mol/Å². */
const NEGATIVE_CURVATURE = -2e-3;
/** How far the fastest atom goes along the softest mode of a saddle to leave it, Å. */
const LEAVING_STEP = 0.25;
/** Saddles left one after another before giving up. */
const MOST_SADDLES = 6;

/** As `MinimizeResult`; converged only when the softest mode's curvature is not negative. */
export interface MinimumResult extends MinimizeResult {
  /** Second derivative along the softest internal mode, kcal/mol/Å²; null without internal freedom or convergence. */
  readonly softestCurvature: number | null;
}

/**
 * As `minimize`, for an energy that does not feel rigid motions; where it converges to a saddle, it goes down from there
 * both ways along the softest mode and keeps the lower end. Options must have a curvature.
 */
export async function minimizeToMinimum(
  energy: EnergyTerm,
  x: Float64Array,
  options: MinimizeOptions & Required<Pick<MinimizeOptions, 'curvature'>>,
  control: Control,
): Promise<MinimumResult> {
  let result = await minimize(energy, x, options, control);
  let { evaluations } = result;
  for (let saddles = 0; result.converged; saddles++) {
    const mode = await softestMode(energy, x, options.curvature, control);
    const softestCurvature = mode?.curvature ?? null;
    if (mode === null || mode.curvature >= NEGATIVE_CURVATURE) {
      return { ...result, evaluations, softestCurvature };
    }
    if (saddles === MOST_SADDLES) {
      return { ...result, evaluations, converged: false, softestCurvature };
    }
    const [up, down] = [1, -1].map((sign) => displace(x, mode.direction, sign));
    const upResult = await minimize(energy, up, options, control);
    const downResult = await minimize(energy, down, options, control);
    evaluations += upResult.evaluations + downResult.evaluations;
    // Mirror images differ by rounding only; the first is kept then, so that the choice is always the same.
    const downIsLower = downResult.energy < upResult.energy - 1e-6;
    result = downIsLower ? downResult : upResult;
    x.set(downIsLower ? down : up);
  }
  return { ...result, evaluations, softestCurvature: null };
}

function displace(x: Float64Array, direction: Float64Array, sign: number): Float64Array {
  let longest = 0;
  for (let a = 0; a < x.length; a += 3) {
    longest = Math.max(longest, Math.hypot(...direction.subarray(a, a + 3)));
  }
  return x.map((value, a) => value + (sign * LEAVING_STEP * direction[a]) / longest);
}
