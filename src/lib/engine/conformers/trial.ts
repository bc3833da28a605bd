/** Takes one geometry to its minimum, unless it is not worth it, and offers it to the pool. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { minimize } from '../minimizer/minimize';
import { SEARCHING_GRADIENT_RMS } from '../minimizer/minimizer';
import type { Molecule } from '../molecule/molecule';
import { hasRightStereo } from '../molecule/stereo';
import type { Pool, Reception } from './pool';

/** What came of a trial; rejected: too high, broken or not converged. */
export interface Outcome {
  readonly reception: Reception | 'rejected';
  /** kcal/mol, where the minimization went. */
  readonly energy: number;
}

export interface Trial {
  readonly counts: { starts: number; minimizations: number };
  /** Minimizes `x` in place and offers it. */
  run(x: Float64Array, control: Control): Promise<Outcome>;
}

/** RMS gradient at which a minimization shows where it is going, kcal/mol/Å. */
const COARSE_GRADIENT_RMS = 0.3;
/** How much energy it may still lose from there, kcal/mol. */
const COARSE_EXCESS = 2;
const COARSE_EVALUATIONS = 400;
const FINE_EVALUATIONS = 2000;

/** Creates the trials of one search; `molecule` has the configuration that every geometry must keep. */
export function createTrial(forceField: ForceField, molecule: Molecule, pool: Pool): Trial {
  const { energy, curvature } = forceField;
  const counts = { starts: 0, minimizations: 0 };
  const coarse = {
    gradientRms: COARSE_GRADIENT_RMS,
    maxEvaluations: COARSE_EVALUATIONS,
    curvature,
  };
  const fine = {
    gradientRms: SEARCHING_GRADIENT_RMS,
    maxEvaluations: FINE_EVALUATIONS,
    curvature,
  };
  return {
    counts,
    run: async (x, control) => {
      counts.starts++;
      const rough = await minimize(energy, x, coarse, control);
      if (!(rough.energy <= pool.ceiling() + COARSE_EXCESS))
        return { reception: 'rejected', energy: rough.energy };
      if (pool.approached(x, rough.energy)) return { reception: 'known', energy: rough.energy };
      counts.minimizations++;
      const result = await minimize(energy, x, fine, control);
      if (!result.converged || !hasRightStereo(molecule, x))
        return { reception: 'rejected', energy: result.energy };
      return { reception: pool.offer(x, result.energy), energy: result.energy };
    },
  };
}
