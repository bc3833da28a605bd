/** A torsion scan as its section shows it, and its geometries packed for the browser. */
import type { Result } from '../engine';
import { ELEMENT_SYMBOLS, type Molecule } from '../engine';
import type { Answer, StoredProfile } from './answers';
import { bondName } from './molecules';
import { opinionsOn } from './opinion-section';
import { provenance, type ToldApart } from './section-parts';

/** Atoms and bonds for what the browser draws and turns; formal charges are not needed for either. */
export function skeletonOf(molecule: Molecule) {
  return {
    symbols: Array.from(molecule.atomicNumbers, (number) => ELEMENT_SYMBOLS[number]),
    bonds: molecule.bonds.map(({ a, b, order }) => [a, b, order] as const),
  };
}

/** A scan, with the second opinions that there are on it. */
export function describeScan(
  molecule: Molecule,
  answer: ToldApart,
  profile: StoredProfile,
  opinions: readonly Answer[] = [],
) {
  const details = answer.details as Pick<Result<'scan'>, 'complete' | 'temperature' | 'symmetry'>;
  return {
    ...provenance(answer),
    profileId: profile.id,
    torsion: profile.torsion,
    name: bondName(molecule, profile.torsion),
    bond: bondName(molecule, profile.torsion.slice(1, 3)),
    step: answer.settings.step as number,
    relaxed: profile.relaxed,
    complete: details.complete,
    temperature: details.temperature,
    symmetry: details.symmetry,
    points: profile.points.map(({ angle, relative }) => ({ angle, relative })),
    stationary: profile.stationary.map(({ coordinates: _coordinates, ...point }) => point),
    opinions: opinionsOn(profile, opinions),
  };
}

/**
 * The geometries of a scan as little-endian float32, 3 an atom, Å: those of the points in the order of the page, then those of
 * the stationary points. Empty for an answer that is no scan.
 */
export function packScan({ profiles }: Answer): Float32Array<ArrayBuffer> {
  const frames = profiles.flatMap(({ points, stationary }) => [...points, ...stationary]);
  const size = frames[0]?.coordinates.length ?? 0;
  const packed = new Float32Array(frames.length * size);
  frames.forEach(({ coordinates }, n) => packed.set(coordinates, n * size));
  return packed;
}
