/** What goes into a minimization and what comes out. */
import type { CurvatureTerm } from '../energy-term';

export interface MinimizeOptions {
  /** Converged when the root mean square of the gradient's components is at most this, kcal/mol/Å. */
  readonly gradientRms: number;
  /** Energy evaluations after which it stops unconverged. */
  readonly maxEvaluations: number;
  /** A curvature that steers the steps; without one the steps start from the identity. */
  readonly curvature?: CurvatureTerm;
}

/** Tolerance for minima that are reported, kcal/mol/Å. */
export const REPORTED_GRADIENT_RMS = 0.001;
/** Tolerance while searching and scanning, kcal/mol/Å. */
export const SEARCHING_GRADIENT_RMS = 0.01;

export interface MinimizeResult {
  /** kcal/mol at the final coordinates. */
  readonly energy: number;
  /** Not converging is a value, not an exception. */
  readonly converged: boolean;
  readonly gradientRms: number;
  readonly evaluations: number;
}
