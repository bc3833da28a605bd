/** One sound three-dimensional start for any molecule. */
import { unattended } from '../control';
import type { Control } from '../control';
import { InputError } from '../errors';
import type { Molecule } from '../molecule/molecule';
import { hasRightStereo } from '../molecule/stereo';
import { createRandom } from '../random';
import { createEmbedder } from './embed';
import type { Embedder } from './embed';
import type { Random } from '../random';

/** Embeddings tried for one geometry. */
const ATTEMPTS = 40;
/** Error of an embedding that breaks no bound worth mentioning. */
const GOOD_ERROR = 0.2;

/**
 * A rough geometry with the right configuration, 3N in Å, from the graph alone; the same seed gives the same one. It
 * wants minimizing before anything is read from it. Throws InputError 'no-conformer' when the configuration asked for
 * cannot be built.
 */
export async function initialGeometry(
  molecule: Molecule,
  seed: number,
  control: Control = unattended,
): Promise<Float64Array> {
  const random = createRandom(seed);
  const geometry = await embedSoundly(molecule, createEmbedder(molecule), random, control);
  if (geometry) return geometry;
  throw new InputError('no-conformer', 'No geometry with the configuration given could be built.');
}

/** The first of several embeddings that is sound, or else the least strained with the right configuration; null without one. */
export async function embedSoundly(
  molecule: Molecule,
  embedder: Embedder,
  random: Random,
  control: Control,
): Promise<Float64Array | null> {
  let best: Float64Array | null = null;
  let bestError = Infinity;
  for (let attempt = 0; attempt < ATTEMPTS && bestError > GOOD_ERROR; attempt++) {
    const { coordinates, error } = await embedder.embed(random, control);
    if (error >= bestError || !hasRightStereo(molecule, coordinates)) continue;
    best = coordinates;
    bestError = error;
  }
  return best;
}
