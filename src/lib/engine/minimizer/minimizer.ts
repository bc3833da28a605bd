/** What goes into a minimization and what comes out. */
import type { CurvatureTerm } from '../energy-term';
import type { Skeleton } from '../molecule/skeleton';
import type { HeldTorsion } from './held-torsions';

export interface MinimizeOptions {
  /** Converged when the root mean square of the gradient's components is at most this, kcal/mol/Å. */
  readonly gradientRms: number;
  /** Energy evaluations after which it stops unconverged. */
  readonly maxEvaluations: number;
  /** A curvature that steers the steps; without one the steps start from the identity. */
  readonly curvature?: CurvatureTerm;
  /** The bonds of the molecule whose energy it is: steps then follow the turns of its parts. Not for atoms held in place. */
  readonly skeleton?: Skeleton;
  /** Torsions held exactly at their targets; a start near them is turned there most gently. */
  readonly torsions?: readonly HeldTorsion[];
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
  /** Root mean square of the gradient's components, kcal/mol/Å; without what turns torsions that are held. */
  readonly gradientRms: number;
  readonly evaluations: number;
}
