/** Where keys, pointer and wheel turn a dial to; degrees. */
import { turnBetween, wrapDegrees } from '$lib/engine/light';

/** Steps of a larger turn. */
const LARGE = 3;
/** A pointer this near to a stationary point is drawn to it, degrees. */
const MAGNET = 2;
const NEARLY = 1e-6;

/** The next angle of the grid in a direction. */
export function nextGridAngle(angle: number, step: number, direction: 1 | -1): number {
  const place = angle / step;
  const next = direction > 0 ? Math.floor(place + NEARLY) + 1 : Math.ceil(place - NEARLY) - 1;
  return wrapDegrees(next * step);
}

/** The next of these angles in a direction, round the circle; the same one where there is no other. */
export function nextOf(angles: readonly number[], angle: number, direction: 1 | -1): number {
  const way = (to: number): number => {
    const turn = (direction * turnBetween(angle, to) + 360) % 360;
    return turn < 0.05 || turn > 359.95 ? 360 : turn;
  };
  return angles.reduce(
    (best, other) => (way(other) < way(best) ? other : best),
    angles[0] ?? angle,
  );
}

/** Where a key turns to; null for a key that turns nothing. */
export function keyTarget(
  event: { readonly key: string; readonly shiftKey: boolean },
  { angle, step, stops }: { angle: number; step: number; stops: readonly number[] },
): number | null {
  const size = event.shiftKey ? LARGE : 1;
  const turn = (direction: 1 | -1, steps: number): number =>
    wrapDegrees(nextGridAngle(angle, step, direction) + direction * (steps - 1) * step);
  switch (event.key) {
    case 'ArrowRight':
    case 'ArrowUp':
      return turn(1, size);
    case 'ArrowLeft':
    case 'ArrowDown':
      return turn(-1, size);
    case 'PageUp':
      return turn(1, LARGE);
    case 'PageDown':
      return turn(-1, LARGE);
    case 'Home':
      return nextOf(stops, angle, -1);
    case 'End':
      return nextOf(stops, angle, 1);
    default:
      return null;
  }
}

/** The angle a pointer means: a stationary point nearby, else the angle itself. */
export function drawnTo(stops: readonly number[], angle: number): number {
  return stops.find((stop) => Math.abs(turnBetween(stop, angle)) < MAGNET) ?? angle;
}
