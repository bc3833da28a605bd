/** Steps that swing atoms about their parents instead of stretching the bonds between them. */
import type { Skeleton } from '../molecule/skeleton';

/** A bond that a step would shorten below this share of its length is not swung. */
const SHORTEST = 0.5;

/**
 * Writes to `to` the geometry `from` (Å, 3N) moved by `scale` times `direction`; with a skeleton, bonds outside of rings
 * keep the direction they get but have the length that the step gives them along themselves. Equal to a straight step to
 * first order.
 */
export function swing(
  skeleton: Skeleton | undefined,
  from: Float64Array,
  scale: number,
  direction: Float64Array,
  to: Float64Array,
): void {
  if (!skeleton) {
    for (let a = 0; a < from.length; a++) to[a] = from[a] + scale * direction[a];
    return;
  }
  const { roots, edges, swings } = skeleton;
  for (let n = 0; n < roots.length; n++) {
    for (let a = roots[n]; a < roots[n] + 3; a++) to[a] = from[a] + scale * direction[a];
  }
  for (let e = 0; e < swings.length; e++) {
    const p = edges[4 * e];
    const a = edges[4 * e + 1];
    const ux = from[a] - from[p];
    const uy = from[a + 1] - from[p + 1];
    const uz = from[a + 2] - from[p + 2];
    const wx = ux + scale * (direction[a] - direction[p]);
    const wy = uy + scale * (direction[a + 1] - direction[p + 1]);
    const wz = uz + scale * (direction[a + 2] - direction[p + 2]);
    let stretch = 1;
    if (swings[e] === 1) {
      const square = ux * ux + uy * uy + uz * uz;
      const along = wx * ux + wy * uy + wz * uz;
      if (along > SHORTEST * square) {
        stretch = along / Math.sqrt(square * (wx * wx + wy * wy + wz * wz));
      }
    }
    to[a] = to[p] + stretch * wx;
    to[a + 1] = to[p + 1] + stretch * wy;
    to[a + 2] = to[p + 2] + stretch * wz;
  }
}
