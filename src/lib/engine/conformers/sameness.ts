/** Tells whether two geometries are one conformer. */
import { bestRmsd } from '../superpose';
import { forEachMatching } from './matchings';
import type { VisibleGraph } from './visible-graph';

/** RMSD up to which two minima of equal energy are one conformer, Å; minimizing leaves soft modes that uncertain. */
export const SAME_RMSD = 0.2;
/** How far single distances may differ then, Å. */
export const SAME_DISTANCE = 0.6;
/** Renumberings tried for the RMSD of different conformers. */
const MOST_RENUMBERINGS = 500;

/** True when some renumbering and superposition lays `x`, or its mirror image, on `y` within `rmsd`, Å. */
export function isSameShape(
  graph: VisibleGraph,
  x: Float64Array,
  y: Float64Array,
  rmsd = SAME_RMSD,
): boolean {
  const mirrored = mirrorImage(x);
  let same = false;
  forEachMatching(graph, { from: x, to: y, tolerance: SAME_DISTANCE }, (image) => {
    same =
      bestRmsd(x, y, graph.order, image) <= rmsd ||
      bestRmsd(mirrored, y, graph.order, image) <= rmsd;
    return !same;
  });
  return same;
}

/** Lowest RMSD over renumberings, with the mirror image, Å. */
export function lowestRmsd(graph: VisibleGraph, x: Float64Array, y: Float64Array): number {
  const mirrored = mirrorImage(x);
  let lowest = Infinity;
  let count = 0;
  forEachMatching(graph, null, (image) => {
    lowest = Math.min(
      lowest,
      bestRmsd(x, y, graph.order, image),
      bestRmsd(mirrored, y, graph.order, image),
    );
    return ++count < MOST_RENUMBERINGS;
  });
  return lowest;
}

/** The geometry seen in a mirror. */
export function mirrorImage(x: Float64Array): Float64Array {
  return x.map((value) => -value);
}
