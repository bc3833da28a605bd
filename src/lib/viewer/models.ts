/** What the 3-D view of several geometries is given, and how they are laid over one another. */
import { superpose } from '../engine/light';
import { coordinatesOf, withCoordinates } from '../domain/molfile-geometry';

/** A geometry as it is drawn. */
export interface Model {
  readonly molfile: string;
  /** Color of its carbon atoms, as #rrggbb; the trade's gray where there is none. */
  readonly carbon?: string;
  /** Written beside it, so that color is not all that tells models apart. */
  readonly name?: string;
}

/** A bond marked in 3-D. */
export interface ModelBond {
  readonly atoms: readonly [number, number];
  readonly color: string;
  readonly text: string;
}

/** Lays all geometries over the first so that the chosen atoms match best; each with the distance left over, Å. */
export function layOver(
  molfiles: readonly string[],
  atoms: readonly number[],
): { readonly molfile: string; readonly rmsd: number }[] {
  const [first] = molfiles;
  if (first === undefined) return [];
  const fixed = coordinatesOf(first);
  return molfiles.map((molfile, n) => {
    if (n === 0) return { molfile, rmsd: 0 };
    const { rmsd, coordinates } = superpose(coordinatesOf(molfile), fixed, atoms);
    return { molfile: withCoordinates(molfile, coordinates), rmsd };
  });
}

/** The atom at which a geometry is farthest from the others: where its name is written. */
export function farthestAtom(
  coordinates: Float64Array,
  others: readonly Float64Array[],
  among: readonly number[],
): number {
  const apart = (atom: number): number =>
    Math.min(
      ...others.map((other) =>
        Math.hypot(
          ...[0, 1, 2].map((axis) => coordinates[3 * atom + axis] - other[3 * atom + axis]),
        ),
      ),
    );
  return among.reduce((best, atom) => (apart(atom) > apart(best) ? atom : best), among[0]);
}

/** Colors of carbon for models side by side, on light and on dark paper: restrained, and apart in lightness too. */
const CARBONS = {
  light: ['#0b6e6e', '#a66a12', '#5b4b8a', '#b83a24', '#3f6b3a', '#51616a'],
  dark: ['#4fb6b0', '#e0a94a', '#b3a4e6', '#f07a5f', '#86bd7e', '#a3b2ba'],
} as const;

/** The color of the n-th model; after the sixth they come again, and the number tells them apart. */
export function carbonColor(n: number, scheme: 'light' | 'dark'): string {
  return CARBONS[scheme][n % CARBONS[scheme].length];
}
