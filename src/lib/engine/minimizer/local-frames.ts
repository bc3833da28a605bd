/**
 * Coordinates that turn with the bonds. A minimizer that remembers steps and changes of gradient remembers them in the
 * directions of the atoms; once a methyl group has turned by twenty degrees, what was a soft turn then is a stiff stretch
 * now, and the memory misleads. Here steps are told bond by bond, each in a frame that the bond carries along, and
 * gradients as the forces through the bonds in the same frames, so that what was learned holds after the turn. The
 * inner product of a step and a gradient is the same in either form. (Transport of vectors by moving frames as in
 * quasi-Newton methods on manifolds: Huang, Gallivan and Absil, SIAM J. Optim. 2015, 25, 1660.)
 */
import type { Skeleton } from '../molecule/skeleton';

/** The frames of one geometry; vectors have 3N components, and `from` and `to` are never the same array. */
export interface LocalFrames {
  /** Lays the frames into the geometry `x` (Å, 3N). */
  place(x: Float64Array): void;
  /** Takes over the frames of another geometry of the same molecule. */
  copy(other: LocalFrames): void;
  /** Three unit vectors a bond; empty where nothing turns. */
  readonly axes: Float64Array;
  gradientToLocal(from: Float64Array, to: Float64Array): void;
  gradientFromLocal(from: Float64Array, to: Float64Array): void;
  stepToLocal(from: Float64Array, to: Float64Array): void;
  stepFromLocal(from: Float64Array, to: Float64Array): void;
}

/** Squared sine, times the neighboring bond's squared length in Å², below which that bond tells no turn. */
const COLLINEAR = 1e-2;
/** Keeps the direction of a bond without length finite, Å². */
const NO_LENGTH = 1e-20;

/** Makes room for frames; without a skeleton nothing turns and both forms of a vector are the same. */
export function createFrames(skeleton: Skeleton | undefined): LocalFrames {
  if (!skeleton) {
    const keep = (from: Float64Array, to: Float64Array): void => to.set(from);
    return {
      place: () => undefined,
      copy: () => undefined,
      axes: new Float64Array(0),
      gradientToLocal: keep,
      gradientFromLocal: keep,
      stepToLocal: keep,
      stepFromLocal: keep,
    };
  }
  const { roots, edges } = skeleton;
  const count = edges.length / 4;
  const axes = new Float64Array(9 * count);

  const keepRoots = (from: Float64Array, to: Float64Array): void => {
    for (let n = 0; n < roots.length; n++) {
      const root = roots[n];
      to[root] = from[root];
      to[root + 1] = from[root + 1];
      to[root + 2] = from[root + 2];
    }
  };
  /** Replaces the vector at `to[a]` and the next two by its components along the axes of bond `e`. */
  const resolve = (e: number, to: Float64Array, a: number): void => {
    // Numbers handed over one by one would be boxed, a vector of bonds at a time.
    const o = 9 * e;
    const x = to[a];
    const y = to[a + 1];
    const z = to[a + 2];
    to[a] = axes[o] * x + axes[o + 1] * y + axes[o + 2] * z;
    to[a + 1] = axes[o + 3] * x + axes[o + 4] * y + axes[o + 5] * z;
    to[a + 2] = axes[o + 6] * x + axes[o + 7] * y + axes[o + 8] * z;
  };
  return {
    axes,
    copy: (other) => axes.set(other.axes),
    place: (x) => {
      for (let e = 0; e < count; e++) layFrame(x, edges, e, axes);
    },
    gradientToLocal: (from, to) => {
      // First the sums over all that hangs on an atom, then each in its own frame.
      to.set(from);
      for (let e = count - 1; e >= 0; e--) {
        const p = edges[4 * e];
        const a = edges[4 * e + 1];
        to[p] += to[a];
        to[p + 1] += to[a + 1];
        to[p + 2] += to[a + 2];
        resolve(e, to, a);
      }
    },
    gradientFromLocal: (from, to) => {
      keepRoots(from, to);
      for (let e = 0; e < count; e++) {
        const p = edges[4 * e];
        const a = edges[4 * e + 1];
        const o = 9 * e;
        const u = from[a];
        const v = from[a + 1];
        const w = from[a + 2];
        const x = axes[o] * u + axes[o + 3] * v + axes[o + 6] * w;
        const y = axes[o + 1] * u + axes[o + 4] * v + axes[o + 7] * w;
        const z = axes[o + 2] * u + axes[o + 5] * v + axes[o + 8] * w;
        to[a] = x;
        to[a + 1] = y;
        to[a + 2] = z;
        to[p] -= x;
        to[p + 1] -= y;
        to[p + 2] -= z;
      }
    },
    stepToLocal: (from, to) => {
      keepRoots(from, to);
      for (let e = 0; e < count; e++) {
        const p = edges[4 * e];
        const a = edges[4 * e + 1];
        to[a] = from[a] - from[p];
        to[a + 1] = from[a + 1] - from[p + 1];
        to[a + 2] = from[a + 2] - from[p + 2];
        resolve(e, to, a);
      }
    },
    stepFromLocal: (from, to) => {
      keepRoots(from, to);
      for (let e = 0; e < count; e++) {
        const p = edges[4 * e];
        const a = edges[4 * e + 1];
        const o = 9 * e;
        const u = from[a];
        const v = from[a + 1];
        const w = from[a + 2];
        to[a] = to[p] + axes[o] * u + axes[o + 3] * v + axes[o + 6] * w;
        to[a + 1] = to[p + 1] + axes[o + 1] * u + axes[o + 4] * v + axes[o + 7] * w;
        to[a + 2] = to[p + 2] + axes[o + 2] * u + axes[o + 5] * v + axes[o + 8] * w;
      }
    },
  };
}

/** The axes of bond `e`: along it, across the plane it spans with its neighbor, and in that plane. */
function layFrame(
  x: Float64Array,
  edges: Readonly<Int32Array>,
  e: number,
  axes: Float64Array,
): void {
  const p = edges[4 * e];
  const a = edges[4 * e + 1];
  const from = edges[4 * e + 2];
  const to = edges[4 * e + 3];
  let ux = x[a] - x[p];
  let uy = x[a + 1] - x[p + 1];
  let uz = x[a + 2] - x[p + 2];
  const shortening = 1 / Math.sqrt(ux * ux + uy * uy + uz * uz + NO_LENGTH);
  ux *= shortening;
  uy *= shortening;
  uz *= shortening;
  const bx = x[to] - x[from];
  const by = x[to + 1] - x[from + 1];
  const bz = x[to + 2] - x[from + 2];
  let wx = uy * bz - uz * by;
  let wy = uz * bx - ux * bz;
  let wz = ux * by - uy * bx;
  let square = wx * wx + wy * wy + wz * wz;
  if (square < COLLINEAR) {
    // Any direction across the bond will do: the frame is as good, it only does not know of turns about the bond.
    const isAlongX = Math.abs(ux) > 0.7;
    wx = isAlongX ? -uz : 0;
    wy = isAlongX ? 0 : uz;
    wz = isAlongX ? ux : -uy;
    square = wx * wx + wy * wy + wz * wz + NO_LENGTH;
  }
  const scale = 1 / Math.sqrt(square);
  wx *= scale;
  wy *= scale;
  wz *= scale;
  const o = 9 * e;
  axes[o] = ux;
  axes[o + 1] = uy;
  axes[o + 2] = uz;
  axes[o + 3] = wx;
  axes[o + 4] = wy;
  axes[o + 5] = wz;
  axes[o + 6] = uy * wz - uz * wy;
  axes[o + 7] = uz * wx - ux * wz;
  axes[o + 8] = ux * wy - uy * wx;
}
