/** One sound three-dimensional start for any molecule. */
import { unattended } from '../control';
import type { Control } from '../control';
import { InputError } from '../errors';
import type { Molecule } from '../molecule/molecule';
import { hasRightStereo } from '../molecule/stereo';
import { createRandom } from '../random';
import type { Random } from '../random';
import { createEmbedder } from './embed';
import type { Embedder } from './embed';
import { hasOpenCenters, pinCenters, pinDoubleBonds } from './pin-configuration';

/** Embeddings tried for one geometry. */
const ATTEMPTS = 40;
/** Error of an embedding that breaks no bound worth mentioning. */
const GOOD_ERROR = 0.2;

/**
 * A rough geometry with the right configuration, 3N in Å, from the graph alone; the same seed gives the same one. What
 * the input left open is settled as in `settleConfiguration`. It wants minimizing before anything is read from it.
 * Throws InputError 'no-conformer' when the configuration asked for cannot be built.
 */
export async function initialGeometry(
  molecule: Molecule,
  seed: number,
  control: Control = unattended,
): Promise<Float64Array> {
  const settled = await settleConfiguration(molecule, control);
  return embedOrThrow(settled, seed, control);
}

/**
 * The molecule with a configuration at every stereocenter and double bond: those left open become, whatever the
 * seed of a search, trans (double bonds) or what a first embedding makes of them (stereocentres).
 */
export async function settleConfiguration(
  molecule: Molecule,
  control: Control = unattended,
): Promise<Molecule> {
  const pinned = pinDoubleBonds(molecule);
  if (!hasOpenCenters(pinned)) return pinned;
  return pinCenters(pinned, await embedOrThrow(pinned, 1, control));
}

async function embedOrThrow(
  molecule: Molecule,
  seed: number,
  control: Control,
): Promise<Float64Array> {
  const random = createRandom(seed);
  const geometry = await embedSoundly(molecule, createEmbedder(molecule), random, control);
  if (geometry) return geometry;
  throw new InputError('no-conformer', 'No geometry with the configuration given could be built.');
}

/** The first of several embeddings that is sound, or else the least strained; null when none has the configuration. */
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
