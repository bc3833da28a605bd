/**
 * The shape of a molecule at any angle of a torsion scan, between the shapes that were computed. Between two of them every
 * distance, angle and torsion runs straight from one to the other, so a turned group turns and does not shrink. Where two
 * neighbors are different arrangements of the rest of the molecule there is no way between them that was computed: the
 * shape changes in the middle, and says so.
 */
import { distance, torsion as torsionAngle, wrapDegrees } from '$lib/engine/light';
import {
  build,
  growTree,
  measure,
  type PlacementTree,
  type Skeleton,
} from './internal-coordinates';

/** A computed shape; Å, 3N. */
export interface Knot {
  readonly angle: number;
  readonly coordinates: Float64Array;
}

/** Two neighboring angles between which the rest of the molecule changes abruptly. */
export interface Jump {
  readonly from: number;
  readonly to: number;
}

export interface TurningGeometry {
  readonly atomCount: number;
  /** In ascending order of the angle they begin at. */
  readonly jumps: readonly Jump[];
  /** Writes the shape at an angle in degrees into `x` (Å, 3N), in the frame of the Newman projection. */
  at(angle: number, x: Float64Array): void;
}

/** A further knot nearer to one than this adds nothing, degrees. */
const SAME_ANGLE = 0.3;
/** A stationary point counted as planar may itself be a little beside it; then it is no shape of that angle, degrees. */
const TRUE_WITHIN = 0.5;
/** A turn of another bond by more than this from one knot to the next is a jump, degrees. */
const LARGEST_TURN = 75;
/** Bonds, such as those that close a ring, change by no more than this share on a computed way. */
const BOND_CHANGE = 0.2;
/** Atoms that come nearer than both ends have them by more than this share have met on no computed way. */
const CLASH_SHARE = 0.6;

interface Shape {
  readonly angle: number;
  readonly numbers: Float64Array;
  readonly coordinates: Float64Array;
}

interface Interval {
  readonly from: Shape;
  readonly to: Shape;
  /** Degrees from one to the next, clockwise. */
  readonly width: number;
  readonly isJump: boolean;
}

/**
 * Joins the shapes of a scan. `grid` are the points of the grid, which are met exactly; `more` are stationary points, which are
 * met where they lie between. Needs at least one point.
 */
export function createTurningGeometry(
  skeleton: Skeleton,
  torsion: readonly number[],
  grid: readonly Knot[],
  more: readonly Knot[] = [],
): TurningGeometry {
  const knots = chooseKnots(torsion, grid, more);
  const tree = growTree(
    skeleton,
    torsion,
    knots.map(({ coordinates }) => coordinates),
  );
  const shapes = knots.map(({ angle, coordinates }): Shape => ({
    angle,
    coordinates,
    numbers: measure(tree, coordinates),
  }));
  const blend = createBlend(tree);
  const intervals = shapes.map((from, n): Interval => {
    const to = shapes[(n + 1) % shapes.length];
    const width = shapes.length === 1 ? 360 : (to.angle - from.angle + 360) % 360;
    return { from, to, width, isJump: isJump(skeleton, tree, blend, from, to) };
  });
  const starts = shapes.map(({ angle }) => angle);
  return {
    atomCount: skeleton.symbols.length,
    jumps: intervals.flatMap(({ from, to, isJump: jumps }) =>
      jumps ? [{ from: from.angle, to: to.angle }] : [],
    ),
    at(angle, x) {
      const wrapped = wrapDegrees(angle);
      const n = starts.findLastIndex((start) => start <= wrapped);
      const interval = intervals.at(n)!;
      const way = ((wrapped - interval.from.angle + 360) % 360) / interval.width;
      build(tree, blend(interval.from, interval.to, way, interval.isJump), x);
    },
  };
}

function chooseKnots(
  [i, j, k, l]: readonly number[],
  grid: readonly Knot[],
  more: readonly Knot[],
): Knot[] {
  const gap = (a: number, b: number): number => Math.abs(wrapDegrees(a - b));
  const knots = [...grid];
  for (const knot of more) {
    const reached = torsionAngle(knot.coordinates, i, j, k, l);
    if (gap(reached, knot.angle) > TRUE_WITHIN) continue;
    if (knots.some(({ angle }) => gap(angle, knot.angle) < SAME_ANGLE)) continue;
    knots.push(knot);
  }
  return knots.sort((a, b) => a.angle - b.angle);
}

type Blend = (from: Shape, to: Shape, way: number, isJump: boolean) => Float64Array;

/** Mixes the numbers of two shapes; the answer is overwritten by the next call. */
function createBlend(tree: PlacementTree): Blend {
  const mixed = new Float64Array(3 + 3 * tree.placements.length);
  return ({ numbers: a }, { numbers: b }, way, isJump) => {
    const share = isJump ? Math.round(way) : way;
    for (let n = 0; n < mixed.length; n++) {
      // After the frame's three numbers every third one is a torsion, which takes the shorter way round.
      const isTorsion = n > 3 && n % 3 === 2;
      // The scanned torsion is the first of them; it keeps turning where the rest jumps.
      const part = n === 5 ? way : share;
      mixed[n] = a[n] + part * (isTorsion ? wrapDegrees(b[n] - a[n]) : b[n] - a[n]);
    }
    return mixed;
  };
}

/** Whether the straight way between two shapes leads through what no molecule is. */
function isJump(
  skeleton: Skeleton,
  tree: PlacementTree,
  blend: Blend,
  from: Shape,
  to: Shape,
): boolean {
  const isHeavy = (atom: number): boolean => skeleton.symbols[atom] !== 'H';
  const turnsFar = tree.placements.some(({ atom, turns }, n) => {
    if (n === 0 || !turns || !isHeavy(atom)) return false;
    return Math.abs(wrapDegrees(to.numbers[5 + 3 * n] - from.numbers[5 + 3 * n])) > LARGEST_TURN;
  });
  if (turnsFar) return true;
  const middle = new Float64Array(from.coordinates.length);
  build(tree, blend(from, to, 0.5, false), middle);
  const [a, b] = [from.coordinates, to.coordinates];
  const tears = skeleton.bonds.some(([p, q]) => {
    const mean = (distance(a, p, q) + distance(b, p, q)) / 2;
    return Math.abs(distance(middle, p, q) / mean - 1) > BOND_CHANGE;
  });
  return tears || meets(middle, a, b);
}

function meets(middle: Float64Array, a: Float64Array, b: Float64Array): boolean {
  for (let p = 0; p < middle.length / 3; p++) {
    for (let q = p + 1; q < middle.length / 3; q++) {
      const near = Math.min(distance(a, p, q), distance(b, p, q));
      if (distance(middle, p, q) < CLASH_SHARE * near) return true;
    }
  }
  return false;
}
