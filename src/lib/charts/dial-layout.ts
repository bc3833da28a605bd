/** Where things stand on the dial: radii in its own units, rings of energy, and the names of basins round the rim. */
import { turnBetween } from '$lib/engine/light';
import { inUnit, type EnergyUnit } from '$lib/domain/energy-units';
import type { Basin, ProfileReading } from '$lib/domain/profile-reading';
import { percent } from '$lib/domain/sentences';
import { arcPath } from './polar';
import { roundTicks } from './scale';

/** Half the width of the drawing. */
export const EXTENT = 234;
/** Zero energy, and the outermost energy ring. */
export const INNER = 90;
export const OUTER = 170;
/** Where the angles are written, and the names of basins. */
export const ANGLES = 187;
export const NAMES = 214;

/** Rings at round energies. */
const RINGS = 4;
/** Width of a letter of the names, about. */
const LETTER = 7.8;
/** Half the width of a ring's number as seen from the center, degrees. */
const NUMBER_WIDTH = 14;

export interface EnergyRings {
  /** Energies of the rings in the unit, from 0. */
  readonly ticks: readonly number[];
  /** Radius of an energy in kcal/mol. */
  radiusOf(relative: number): number;
}

/** Rings for energies (kcal/mol) up to the highest, at round numbers of the unit. */
export function energyRings(highest: number, unit: EnergyUnit): EnergyRings {
  const ticks = roundTicks(Math.max(0.1, inUnit(highest, unit)), RINGS);
  const top = ticks[ticks.length - 1];
  return {
    ticks,
    radiusOf: (relative) => INNER + ((OUTER - INNER) * Math.max(0, inUnit(relative, unit))) / top,
  };
}

/** The direction in which the rings' numbers cover least of the curve, degrees. */
export function numbersAngle({ curve, basins }: ProfileReading): number {
  const highestNear = (angle: number): number =>
    Math.max(...[-NUMBER_WIDTH, 0, NUMBER_WIDTH].map((off) => curve.at(angle + off)));
  // Beside a basin's bottom rather than on it, where its mark and the hand most often stand.
  const highest = Math.max(...curve.values);
  const crowding = (angle: number): number =>
    basins.some(({ minimum }) => Math.abs(turnBetween(minimum.angle, angle)) <= NUMBER_WIDTH)
      ? highest
      : 0;
  const directions = Array.from({ length: 24 }, (_, n) => -165 + 15 * n);
  return directions.reduce((best, angle) =>
    highestNear(angle) + crowding(angle) < highestNear(best) + crowding(best) ? angle : best,
  );
}

/** Half the arc that a text takes at a radius, degrees. */
export function halfArc(text: string, letter: number, radius: number): number {
  return ((text.length * letter) / radius / Math.PI) * 90;
}

/** The line along which a text stands: on the lower half it runs the other way, so that nothing stands on its head. */
export function textArc(
  { angle, half }: Omit<RimName, 'text'>,
  radius: number,
  height: number,
): string {
  const isLower = Math.cos((angle * Math.PI) / 180) < -0.1;
  const reach = Math.min(half + 8, 179);
  return isLower
    ? arcPath(radius + height, angle + reach, angle - reach)
    : arcPath(radius, angle - reach, angle + reach);
}

/** A name written along the rim. */
export interface RimName {
  readonly text: string;
  /** Middle of the text, degrees. */
  readonly angle: number;
  /** Half the arc it takes, degrees. */
  readonly half: number;
}

/** The names of the basins with their shares, each within its basin, shorter where that is narrow. */
export function rimNames(basins: readonly Basin[]): RimName[] {
  return basins.flatMap((basin) => {
    const { from, to, minimum, population } = basin;
    for (const text of [`${minimum.label} · ${percent(population)}`, minimum.label]) {
      const half = halfArc(text, LETTER, NAMES);
      if (2 * half > to - from) continue;
      const along = (minimum.angle - from + 720) % 360;
      const angle = from + Math.min(Math.max(along, half), to - from - half);
      return [{ text, angle, half }];
    }
    return [];
  });
}
