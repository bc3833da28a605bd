/** Turns the pool of a search into its result: true minima only, told apart once more, weighed. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { minimizeToMinimum } from '../minimizer/minimize-to-minimum';
import { REPORTED_GRADIENT_RMS } from '../minimizer/minimizer';
import type { Molecule } from '../molecule/molecule';
import { hasRightStereo } from '../molecule/stereo';
import { superpose } from '../superpose';
import { GAS_CONSTANT } from '../units';
import type { ConformerSearchOptions, ConformerSearchResult, SearchEnd } from './conformers';
import { degeneracies } from './degeneracy';
import type { Pool } from './pool';
import { createPool } from './pool';
import { lowestRmsd } from './sameness';
import type { Trial } from './trial';
import type { VisibleGraph } from './visible-graph';

/** Energy by which a conformer just outside the window may still fall when minimized to the end, kcal/mol. */
const LAST_FALL = 0.05;
const MOST_EVALUATIONS = 20_000;

/** Minimizes what lies in the window to the end and describes it. */
export async function finish(
  forceField: ForceField,
  graph: VisibleGraph,
  { pool, trial, molecule }: { pool: Pool; trial: Trial; molecule: Molecule },
  options: ConformerSearchOptions,
  ended: SearchEnd,
  control: Control,
): Promise<ConformerSearchResult> {
  const last = createPool(graph, Infinity, options.window);
  const ceiling =
    Math.min(pool.ceiling(), (pool.found[0]?.energy ?? 0) + options.window) + LAST_FALL;
  const inside = pool.found.filter(({ energy }) => energy <= ceiling);
  for (const [n, { coordinates }] of inside.entries()) {
    control.report(n / inside.length, 'Finishing minima');
    const x = coordinates.slice();
    const result = await minimizeToMinimum(
      forceField.energy,
      x,
      {
        gradientRms: REPORTED_GRADIENT_RMS,
        maxEvaluations: MOST_EVALUATIONS,
        curvature: forceField.curvature,
      },
      control,
    );
    if (result.converged && hasRightStereo(molecule, x)) last.offer(x, result.energy);
  }
  const within = last.found.filter(({ energy }) => energy - last.found[0].energy <= options.window);
  const kept = within.slice(0, options.limit);
  const weights = degeneracies(
    molecule,
    graph,
    kept.map(({ coordinates }) => coordinates),
  );
  const boltzmann = kept.map(
    ({ energy }, n) =>
      weights[n] * Math.exp((kept[0].energy - energy) / (GAS_CONSTANT * options.temperature)),
  );
  const sum = boltzmann.reduce((total, value) => total + value, 0);
  const lowest = kept.length > 0 ? centered(kept[0].coordinates) : new Float64Array();
  const end = ended === 'stable' && within.length > options.limit ? 'limit' : ended;
  return {
    conformers: kept.map(({ coordinates, energy }, n) => ({
      coordinates: superpose(coordinates, lowest, graph.order).coordinates,
      energy,
      relative: energy - kept[0].energy,
      degeneracy: weights[n],
      population: boltzmann[n] / sum,
      rmsdToLowest: n === 0 ? 0 : lowestRmsd(graph, coordinates, lowest),
      converged: true,
    })),
    complete: end === 'stable',
    ended: end,
    settled: ended === 'stable',
    counts: trial.counts,
  };
}

/** The geometry with its center at the origin. */
function centered(x: Float64Array): Float64Array {
  const center = [0, 1, 2].map((d) => {
    let sum = 0;
    for (let a = d; a < x.length; a += 3) sum += x[a];
    return (3 * sum) / x.length;
  });
  return x.map((value, a) => value - center[a % 3]);
}
