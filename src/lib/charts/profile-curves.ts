/** The lines of a straight profile: energies in the unit they are read in, over -180 to 180 degrees. */
import { GAS_CONSTANT, type PeriodicCurve } from '$lib/engine/light';
import { inUnit, type EnergyUnit } from '$lib/domain/energy-units';
import type { StationaryPoint } from '$lib/domain/profile-reading';

export interface PlacedPoint {
  readonly angle: number;
  readonly value: number;
}

/** Degrees between two points of a drawn line. */
const FINENESS = 2;

function sampled(valueAt: (angle: number) => number): PlacedPoint[] {
  return Array.from({ length: 360 / FINENESS + 1 }, (_, n) => {
    const angle = -180 + n * FINENESS;
    return { angle, value: valueAt(angle) };
  });
}

/** The energy in the unit. */
export function energyLine(curve: PeriodicCurve, unit: EnergyUnit): PlacedPoint[] {
  return sampled((angle) => inUnit(curve.at(angle), unit));
}

/** How likely each angle is at a temperature in K, as a share of the likeliest. */
export function populationLine(curve: PeriodicCurve, temperature: number): PlacedPoint[] {
  const lowest = Math.min(...curve.values);
  return sampled((angle) => Math.exp(-(curve.at(angle) - lowest) / (GAS_CONSTANT * temperature)));
}

/** A name beside its point, in pixels. */
export interface PlacedName {
  readonly text: string;
  readonly x: number;
  readonly y: number;
}

/** Width of a letter, and height of a line. */
const LETTER = 6.6;
const LINE = 14;

/**
 * Names of stationary points, minima below and maxima above, the lowest and highest first; one that would run into another
 * is left out, and the table has it.
 */
export function placeNames(
  points: readonly StationaryPoint[],
  place: (point: StationaryPoint) => { readonly x: number; readonly y: number },
  width: number,
): PlacedName[] {
  const taken: { left: number; right: number; y: number }[] = [];
  const rank = ({ kind, relative }: StationaryPoint): number =>
    kind === 'minimum' ? relative : -relative;
  return points
    .toSorted((a, b) => rank(a) - rank(b))
    .flatMap((point): PlacedName[] => {
      const at = place(point);
      const half = (point.label.length * LETTER) / 2;
      const x = Math.min(Math.max(at.x, half), width - half);
      const y = point.kind === 'minimum' ? at.y + 20 : at.y - 11;
      const box = { left: x - half - 3, right: x + half + 3, y };
      const isFree = taken.every(
        (other) =>
          box.right < other.left || box.left > other.right || Math.abs(box.y - other.y) > LINE,
      );
      if (!isFree) return [];
      taken.push(box);
      return [{ text: point.label, x, y }];
    });
}
