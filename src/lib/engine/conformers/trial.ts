/** Takes one geometry to its minimum, unless it is not worth it, and offers it to the pool. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { minimize } from '../minimizer/minimize';
import { REPORTED_GRADIENT_RMS } from '../minimizer/minimizer';
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

/**
 * A minimization pauses at these RMS gradients, kcal/mol/Å, and goes on only from energies that can still come into the
 * window: from there it hardly ever loses more than `fall`, kcal/mol.
 */
const STAGES = [
  { gradientRms: 1, fall: 6 },
  { gradientRms: 0.3, fall: 2 },
];
const MOST_EVALUATIONS = 2000;

/** Creates the trials of one search; `molecule` has the configuration that every geometry must keep. */
export function createTrial(forceField: ForceField, molecule: Molecule, pool: Pool): Trial {
  const { energy, curvature, skeleton } = forceField;
  const counts = { starts: 0, minimizations: 0 };
  const options = { maxEvaluations: MOST_EVALUATIONS, curvature, skeleton };
  return {
    counts,
    run: async (x, control) => {
      counts.starts++;
      for (const { gradientRms, fall } of STAGES) {
        const rough = await minimize(energy, x, { ...options, gradientRms }, control);
        if (!(rough.energy <= pool.ceiling() + fall)) {
          return { reception: 'rejected', energy: rough.energy };
        }
        if (pool.approached(x, rough.energy)) return { reception: 'known', energy: rough.energy };
      }
      counts.minimizations++;
      const result = await minimize(
        energy,
        x,
        { ...options, gradientRms: REPORTED_GRADIENT_RMS },
        control,
      );
      if (!result.converged || !hasRightStereo(molecule, x)) {
        return { reception: 'rejected', energy: result.energy };
      }
      return { reception: pool.offer(x, result.energy), energy: result.energy };
    },
  };
}
