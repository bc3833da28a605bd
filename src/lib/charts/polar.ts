/** Drawing round a circle: angles in degrees clockwise from the top, as in a Newman projection; the center is the origin. */
import { toRadians } from '$lib/engine/light';

/** The point at an angle and a radius. */
export function polarPoint(angle: number, radius: number): readonly [x: number, y: number] {
  const radians = toRadians(angle);
  return [radius * Math.sin(radians), -radius * Math.cos(radians)];
}

const written = ([x, y]: readonly [number, number]): string => `${x.toFixed(2)} ${y.toFixed(2)}`;

/** An arc clockwise from one angle to a larger one, less than a full turn; counterclockwise where `to` is smaller. */
export function arcPath(radius: number, from: number, to: number): string {
  const isLarge = Math.abs(to - from) > 180 ? 1 : 0;
  const isClockwise = to > from ? 1 : 0;
  return `M${written(polarPoint(from, radius))} A${radius} ${radius} 0 ${isLarge} ${isClockwise} ${written(polarPoint(to, radius))}`;
}

/** The piece of a ring between two angles and two radii. */
export function sectorPath(inner: number, outer: number, from: number, to: number): string {
  const end = Math.min(to, from + 359.99);
  const back = arcPath(inner, end, from).replace('M', 'L');
  return `${arcPath(outer, from, end)} ${back} Z`;
}

/** A closed curve round the circle, with its radius at each angle, drawn every `fineness` degrees. */
export function roundPath(radiusAt: (angle: number) => number, fineness: number): string {
  const points = Array.from({ length: Math.round(360 / fineness) }, (_, n) => {
    const angle = -180 + n * fineness;
    return written(polarPoint(angle, radiusAt(angle)));
  });
  return `M${points.join(' L')} Z`;
}

/** The angle of a point, (-180, 180]. */
export function angleOfPoint(x: number, y: number): number {
  return (Math.atan2(x, -y) * 180) / Math.PI;
}
