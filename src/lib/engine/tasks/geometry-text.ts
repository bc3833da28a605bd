/** Geometries on their way out of the engine. */
import type { Molecule } from '../molecule/molecule';
import { writeMolfile } from '../molecule/write';
import type { AsMolfile } from './result';

/** The same with the geometry as a molfile in the place of its coordinates. */
export function withMolfile<Shape extends { readonly coordinates: Float64Array }>(
  molecule: Molecule,
  { coordinates, ...rest }: Shape,
): AsMolfile<Shape> {
  return { ...rest, molfile: writeMolfile(molecule, coordinates) };
}
