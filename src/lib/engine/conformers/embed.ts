/**
 * Distance geometry: coordinates from nothing but the graph (Crippen and Havel, Distance Geometry and Molecular
 * Conformation, 1988), from random starts rather than from a metric matrix, so that every kind of shape is met.
 */
import type { Control } from '../control';
import { minimize } from '../minimizer/minimize';
import type { Molecule } from '../molecule/molecule';
import type { Random } from '../random';
import { distanceBounds } from './distance-bounds';
import { embeddingError, embeddingSize, volumeBounds } from './embedding-error';

/** Makes shapes of one molecule. */
export interface Embedder {
  /** One shape, 3N coordinates in Å, and how badly it breaks the bounds (below 0.1 is good). */
  embed(
    random: Random,
    control: Control,
  ): Promise<{ readonly coordinates: Float64Array; readonly error: number }>;
}

/** How much the fourth dimension costs, pass by pass: free to use at first, then squeezed out. */
const FOURTH_WEIGHTS = [0.01, 1];
const GRADIENT_RMS = 1e-3;
const MAX_EVALUATIONS = 400;

/** Prepares the bounds of a molecule. */
export function createEmbedder(molecule: Molecule): Embedder {
  const n = molecule.atomCount;
  const bounds = distanceBounds(molecule);
  const volumes = volumeBounds(molecule);
  const passes = FOURTH_WEIGHTS.map((weight) => embeddingError(n, bounds, volumes, weight));
  const flatError = passes[passes.length - 1];
  const side = 2 + 2 * Math.cbrt(n);

  return {
    embed: async (random, control) => {
      const x = new Float64Array(embeddingSize(n));
      for (let a = 0; a < 4 * n; a++) x[a] = side * (random.uniform() - 0.5);
      for (const pass of passes) {
        const options = { gradientRms: GRADIENT_RMS, maxEvaluations: MAX_EVALUATIONS };
        await minimize(pass, x, options, control);
      }
      x.fill(0, 3 * n);
      return { coordinates: x.slice(0, 3 * n), error: flatError(x, new Float64Array(x.length)) };
    },
  };
}
