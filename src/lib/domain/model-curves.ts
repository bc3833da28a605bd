/** Curves of several energy models over one torsion's grid: their extremes, their mean and how far they lie apart. */
import { torsionRange, turnBetween, wrapDegrees } from '../engine/light';
import { readProfile, type ProfileReading, type StationaryPoint } from './profile-reading';

/** One model's curve; angles in degrees, ascending, energies in kcal/mol from any zero, null where a point is missing. */
export interface ModelCurve {
  readonly model: string;
  readonly points: readonly { readonly angle: number; readonly energy: number | null }[];
}

/** A curve above its own lowest point. */
export interface RelativeCurve {
  readonly model: string;
  readonly points: readonly { readonly angle: number; readonly relative: number | null }[];
}

/** Ups and downs smaller than this are noise of the optimizer, kcal/mol. */
const NOISE = 0.05;
/** An extreme this near to a named one of another model has its name, degrees. */
const SAME_PLACE = 45;
/** A named point of the other kind must be nearer by this to give its name, degrees. */
const OTHER_KIND = 10;

type Known = { readonly angle: number; readonly energy: number };

function knownPoints({ points }: ModelCurve): Known[] {
  return points.flatMap(({ angle, energy }) => (energy === null ? [] : [{ angle, energy }]));
}

/** Each model's curve above its own lowest point. */
export function aboveOwnLowest(curve: ModelCurve): RelativeCurve {
  const lowest = Math.min(...knownPoints(curve).map(({ energy }) => energy));
  return {
    model: curve.model,
    points: curve.points.map(({ angle, energy }) => ({
      angle,
      relative: energy === null ? null : energy - lowest,
    })),
  };
}

/** The mean of the models at each angle, and between which energies they lie; null where one of them has no point. */
export interface Consensus {
  readonly models: readonly string[];
  readonly points: readonly {
    readonly angle: number;
    readonly mean: number | null;
    readonly low: number | null;
    readonly high: number | null;
  }[];
}

/** Of curves over the same angles, each above its own lowest point. */
export function consensusOf(curves: readonly RelativeCurve[]): Consensus {
  const [first] = curves;
  return {
    models: curves.map(({ model }) => model),
    points: first.points.map(({ angle }, n) => {
      const values = curves.map(({ points }) => points[n].relative);
      if (values.some((value) => value === null))
        return { angle, mean: null, low: null, high: null };
      const known = values as number[];
      return {
        angle,
        mean: known.reduce((sum, value) => sum + value, 0) / known.length,
        low: Math.min(...known),
        high: Math.max(...known),
      };
    }),
  };
}

/** The widest gap between models at any angle, and where; null where no angle has all of them. */
export function widestSpread({ points }: Consensus): { angle: number; spread: number } | null {
  let widest: { angle: number; spread: number } | null = null;
  for (const { angle, low, high } of points) {
    if (low === null || high === null) continue;
    if (!widest || high - low > widest.spread) widest = { angle, spread: high - low };
  }
  return widest;
}

/** Minima and maxima of a curve, in turn and ascending in angle, read off parabolas through neighboring points. */
function extremesOf(points: readonly Known[]): { kind: 'minimum' | 'maximum'; at: Known }[] {
  const count = points.length;
  if (count < 3) return [];
  const found: { kind: 'minimum' | 'maximum'; at: Known; n: number }[] = [];
  points.forEach(({ energy }, n) => {
    const before = points[(n + count - 1) % count].energy;
    // Of equal neighbors the first counts.
    const behind = points[(n + 1) % count].energy;
    if (energy < before && energy <= behind) found.push({ kind: 'minimum', at: points[n], n });
    if (energy > before && energy >= behind) found.push({ kind: 'maximum', at: points[n], n });
  });
  return withoutNoise(found)
    .map(({ kind, n }) => ({
      kind,
      at: vertex(points[(n + count - 1) % count], points[n], points[(n + 1) % count]),
    }))
    .toSorted((a, b) => a.at.angle - b.at.angle);
}

/** Takes out neighboring pairs of a minimum and a maximum that hardly differ, the smallest difference first. */
function withoutNoise<T extends { readonly at: Known }>(extremes: readonly T[]): T[] {
  const left = [...extremes];
  while (left.length > 2) {
    const steps = left.map(({ at }, n) =>
      Math.abs(left[(n + 1) % left.length].at.energy - at.energy),
    );
    const smallest = steps.indexOf(Math.min(...steps));
    if (steps[smallest] >= NOISE) break;
    const next = (smallest + 1) % left.length;
    left.splice(Math.max(smallest, next), 1);
    left.splice(Math.min(smallest, next), 1);
  }
  return left;
}

/** The vertex of the parabola through three neighboring points, kept between the outer two's midpoints. */
function vertex(before: Known, at: Known, behind: Known): Known {
  const left = turnBetween(at.angle, before.angle);
  const right = turnBetween(at.angle, behind.angle);
  const slopeLeft = (before.energy - at.energy) / left;
  const slopeRight = (behind.energy - at.energy) / right;
  const curvature = (slopeRight - slopeLeft) / (right - left);
  if (curvature === 0) return at;
  const slope = slopeRight - curvature * right;
  const shift = Math.min(Math.max(-slope / (2 * curvature), left / 2), right / 2);
  return {
    angle: wrapDegrees(at.angle + shift),
    energy: at.energy + slope * shift + curvature * shift * shift,
  };
}

const rangeWords = {
  sp: 'synperiplanar',
  sc: 'synclinal',
  ac: 'anticlinal',
  ap: 'antiperiplanar',
} as const;

/** What an extreme is called: as the named point nearest to it, of its own kind if two are as near; else by its Klyne-Prelog range. */
function nameOf(kind: string, angle: number, named: readonly StationaryPoint[]): string {
  const away = (point: StationaryPoint) =>
    distance(point.angle, angle) + (point.kind === kind ? 0 : OTHER_KIND);
  const [nearest] = named.toSorted((a, b) => away(a) - away(b));
  return nearest && distance(nearest.angle, angle) <= SAME_PLACE
    ? nearest.label
    : rangeWords[torsionRange(angle)];
}

const distance = (a: number, b: number): number => Math.abs(turnBetween(a, b));

/**
 * Reads a model's curve at a temperature in K as a profile is read; names come from the stationary points of the scan it
 * belongs to. Null where fewer than three points are known.
 */
export function readModelCurve(
  curve: ModelCurve,
  scan: {
    readonly stationary: readonly StationaryPoint[];
    readonly symmetry: { readonly mirror: boolean };
  },
  temperature: number,
): ProfileReading | null {
  const known = knownPoints(curve);
  if (known.length < 3) return null;
  const extremes = extremesOf(known);
  const lowest = Math.min(
    ...[...known, ...extremes.map(({ at }) => at)].map(({ energy }) => energy),
  );
  return readProfile(
    {
      symmetry: scan.symmetry,
      points: known.map(({ angle, energy }) => ({ angle, relative: energy - lowest })),
      stationary: extremes.map(({ kind, at }) => ({
        kind,
        angle: at.angle,
        relative: at.energy - lowest,
        label: nameOf(kind, at.angle, scan.stationary),
        converged: true,
      })),
    },
    temperature,
  );
}
