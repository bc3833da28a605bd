/** The lines of a second opinion over a straight profile: each other model, their mean, and the band between the models. */
import { createPeriodicCurve } from '../engine/light';
import type { OpinionReading } from '../domain/opinion-reading';
import { inUnit, type EnergyUnit } from '../domain/energy-units';
import type { PlacedPoint } from './profile-curves';

/** A line in pieces, since it is not drawn over gaps. */
export interface OpinionLine {
  readonly name: string;
  /** Classes of its stroke; dashes differ, so that color is not needed to tell lines apart. */
  readonly look: string;
  readonly pieces: readonly (readonly PlacedPoint[])[];
}

export interface PlacedRange {
  readonly angle: number;
  readonly low: number;
  readonly high: number;
}

export interface OpinionLines {
  readonly lines: readonly OpinionLine[];
  readonly band: readonly (readonly PlacedRange[])[];
  /** The highest value of all. */
  readonly top: number;
}

/** Degrees between two points of a drawn line. */
const FINENESS = 2;
const OTHER_LOOKS = [
  'stroke-ink-soft [stroke-dasharray:7_4]',
  'stroke-ink-soft [stroke-dasharray:2_3]',
];
const MEAN_LOOK = 'stroke-ink stroke-2';

type Knot = { readonly angle: number; readonly value: number | null };

/** The runs of angles, sampled from -180 to 180, on both sides of which the curve is known. */
function knownRuns(knots: readonly Knot[]): number[][] {
  const count = knots.length;
  const isKnown = (angle: number): boolean => {
    const next = knots.findIndex((knot) => knot.angle >= angle);
    const behind = next < 0 ? 0 : next;
    if (knots[behind].angle === angle) return knots[behind].value !== null;
    return knots[behind].value !== null && knots[(behind + count - 1) % count].value !== null;
  };
  const runs: number[][] = [];
  let run: number[] = [];
  for (let angle = -180; angle <= 180; angle += FINENESS) {
    if (isKnown(angle === -180 ? 180 : angle)) run.push(angle);
    else if (run.length > 0) {
      runs.push(run);
      run = [];
    }
  }
  return run.length > 0 ? [...runs, run] : runs;
}

function curveOf(knots: readonly Knot[]): (angle: number) => number {
  const known = knots.filter(({ value }) => value !== null);
  const curve = createPeriodicCurve(
    known.map(({ angle }) => angle),
    known.map(({ value }) => value as number),
  );
  return (angle) => curve.at(angle);
}

function piecesOf(knots: readonly Knot[], unit: EnergyUnit): PlacedPoint[][] {
  if (knots.every(({ value }) => value === null)) return [];
  const at = curveOf(knots);
  return knownRuns(knots).map((run) =>
    run.map((angle) => ({ angle, value: inUnit(at(angle), unit) })),
  );
}

/** What a chart draws of an opinion beside the scan's own line, in the unit. */
export function opinionLines(opinion: OpinionReading, unit: EnergyUnit): OpinionLines {
  const others = opinion.models.slice(1).map(({ model, curve }, n) => ({
    name: opinion.depth === 'quick' ? `${model}, rough` : model,
    look: OTHER_LOOKS[n],
    pieces: piecesOf(
      curve.points.map(({ angle, relative }) => ({ angle, value: relative })),
      unit,
    ),
  }));
  // A quick look is no opinion to take a mean with.
  const isQuick = opinion.depth === 'quick';
  const { points } = opinion.consensus;
  const mean = {
    name: 'mean',
    look: MEAN_LOOK,
    pieces: piecesOf(
      points.map(({ angle, mean: value }) => ({ angle, value })),
      unit,
    ),
  };
  const lines = isQuick ? others : [...others, mean];
  return {
    lines,
    band: bandOf(points, unit),
    top: Math.max(0, ...lines.flatMap(({ pieces }) => pieces.flat().map(({ value }) => value))),
  };
}

function bandOf(points: OpinionReading['consensus']['points'], unit: EnergyUnit): PlacedRange[][] {
  const lows = points.map(({ angle, low: value }) => ({ angle, value }));
  const highs = points.map(({ angle, high: value }) => ({ angle, value }));
  if (lows.every(({ value }) => value === null)) return [];
  const [low, high] = [curveOf(lows), curveOf(highs)];
  return knownRuns(lows).map((run) =>
    run.map((angle) => ({
      angle,
      low: inUnit(low(angle), unit),
      high: inUnit(high(angle), unit),
    })),
  );
}
