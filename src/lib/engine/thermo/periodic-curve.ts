/**
 * A smooth periodic curve through the points of a torsion profile: piecewise cubic, slopes after Steffen (Astron.
 * Astrophys. 1990, 239, 443). It never rises above or falls below the two points it runs between, so it shows no minimum
 * and no barrier that was not computed.
 */
import { wrapDegrees } from '../units';

export interface PeriodicCurve {
  /** The knots' angles, degrees, ascending in (-180, 180]. */
  readonly angles: readonly number[];
  /** The knots' values. */
  readonly values: readonly number[];
  /** Value at any angle in degrees. */
  at(angle: number): number;
}

/** Knots nearer to each other than this are one point, degrees. */
const SAME_ANGLE = 1e-6;

/**
 * Lays the curve through points given in any order; of points at the same angle (modulo 360°) the lowest counts.
 * Needs at least one point; throws plainly otherwise.
 */
export function createPeriodicCurve(
  angles: ArrayLike<number>,
  values: ArrayLike<number>,
): PeriodicCurve {
  if (angles.length === 0) throw new Error('a periodic curve needs at least one point');
  const knots = sortedKnots(angles, values);
  const x = knots.map(([angle]) => angle);
  const y = knots.map(([, value]) => value);
  const count = x.length;
  const width = x.map((angle, i) => (i + 1 < count ? x[i + 1] - angle : x[0] + 360 - angle));
  const secant = y.map((value, i) => (y[(i + 1) % count] - value) / width[i]);
  const slope = y.map((_, i) => {
    const before = (i + count - 1) % count;
    return steffenSlope(secant[before], secant[i], width[before], width[i]);
  });

  const at = (angle: number): number => {
    const wrapped = wrapDegrees(angle);
    let i = lastKnotAtOrBelow(x, wrapped);
    if (i < 0) i = count - 1;
    const next = (i + 1) % count;
    const h = width[i];
    const t = (wrapped >= x[i] ? wrapped - x[i] : wrapped + 360 - x[i]) / h;
    const rest = 1 - t;
    return (
      rest * rest * (1 + 2 * t) * y[i] +
      t * t * (3 - 2 * t) * y[next] +
      h * t * rest * (rest * slope[i] - t * slope[next])
    );
  };
  return { angles: x, values: y, at };
}

function sortedKnots(angles: ArrayLike<number>, values: ArrayLike<number>): [number, number][] {
  const knots: [number, number][] = [];
  for (let i = 0; i < angles.length; i++) knots.push([wrapDegrees(angles[i]), values[i]]);
  knots.sort((a, b) => a[0] - b[0] || a[1] - b[1]);
  const distinct: [number, number][] = [];
  for (const knot of knots) {
    const last = distinct.at(-1);
    if (last && knot[0] - last[0] < SAME_ANGLE) last[1] = Math.min(last[1], knot[1]);
    else distinct.push(knot);
  }
  return distinct;
}

/** Steffen's equations 8 and 11: the parabola's slope, cut back so that the cubic stays monotone. */
function steffenSlope(left: number, right: number, leftWidth: number, rightWidth: number): number {
  if (left * right <= 0) return 0;
  const parabola = (left * rightWidth + right * leftWidth) / (leftWidth + rightWidth);
  const limit = Math.min(2 * Math.abs(left), 2 * Math.abs(right), Math.abs(parabola));
  return Math.sign(left) * limit;
}

function lastKnotAtOrBelow(x: readonly number[], value: number): number {
  let low = 0;
  let high = x.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (x[middle] <= value) low = middle + 1;
    else high = middle;
  }
  return low - 1;
}
