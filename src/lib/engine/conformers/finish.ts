/** Turns the pool of a search into its result: true minima only, told apart once more, weighed. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { minimizeToMinimum } from '../minimizer/minimize-to-minimum';
import { REPORTED_GRADIENT_RMS } from '../minimizer/minimizer';
import type { Molecule } from '../molecule/molecule';
import { hasRightStereo } from '../molecule/stereo';
import { superpose } from '../superpose';
import { GAS_CONSTANT } from '../units';
import type { Conformer, ConformerSearchOptions } from './conformers';
import { degeneracies } from './degeneracy';
import type { Found, Pool } from './pool';
import { createPool } from './pool';
import { lowestRmsd } from './sameness';
import type { VisibleGraph } from './visible-graph';

/** How much a conformer may still fall when minimized to the end, kcal/mol: a saddle, or the last of a soft mode. */
const LAST_FALL = 0.1;
const MOST_EVALUATIONS = 20_000;

/**
 * Minimizes the found geometries, lowest first, until no negative curvature is left and as many as wanted, and one
 * more, are there; `most` at most.
 */
export async function finishMinima(
  forceField: ForceField,
  molecule: Molecule,
  graph: VisibleGraph,
  pool: Pool,
  options: ConformerSearchOptions,
  most: number,
  control: Control,
): Promise<readonly Found[]> {
  const minima = createPool(graph, options.limit, options.window);
  const settings = {
    gradientRms: REPORTED_GRADIENT_RMS,
    maxEvaluations: MOST_EVALUATIONS,
    curvature: forceField.curvature,
    skeleton: forceField.skeleton,
  };
  for (const { coordinates, energy } of pool.found.slice(0, most)) {
    if (energy > minima.ceiling() + LAST_FALL) break;
    control.report(minima.found.length / (options.limit + 1), 'Finishing minima');
    const x = coordinates.slice();
    const result = await minimizeToMinimum(forceField.energy, x, settings, control);
    if (result.converged && hasRightStereo(molecule, x)) minima.offer(x, result.energy);
  }
  return minima.found.filter(({ energy }) => energy - minima.found[0].energy <= options.window);
}

/** Describes minima, lowest first: degeneracies, populations, distances from the lowest. */
export async function describeConformers(
  molecule: Molecule,
  graph: VisibleGraph,
  minima: readonly Found[],
  temperature: number,
  control: Control,
): Promise<Conformer[]> {
  const weights = degeneracies(
    molecule,
    graph,
    minima.map(({ coordinates }) => coordinates),
  );
  const lowestEnergy = minima[0].energy;
  const shares = minima.map(
    ({ energy }, n) =>
      weights[n] * Math.exp((lowestEnergy - energy) / (GAS_CONSTANT * temperature)),
  );
  const sum = shares.reduce((total, share) => total + share, 0);
  const lowest = centered(minima[0].coordinates);
  const conformers: Conformer[] = [];
  for (const [n, { coordinates, energy }] of minima.entries()) {
    if (control.due()) await control.pause();
    conformers.push({
      coordinates: n === 0 ? lowest : superpose(coordinates, lowest, graph.order).coordinates,
      energy,
      relative: energy - lowestEnergy,
      degeneracy: weights[n],
      population: shares[n] / sum,
      rmsdToLowest: n === 0 ? 0 : lowestRmsd(graph, coordinates, lowest),
      converged: true,
    });
  }
  return conformers;
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
