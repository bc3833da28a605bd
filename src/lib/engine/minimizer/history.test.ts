/** The two-loop recursion and what it does with curvature that is none. */
import { describe, expect, it } from 'vitest';
import { createHistory, dot } from './history';

const unchanged = (): void => undefined;

/** Twelve numbers that differ. */
function numbers(seed: number): Float64Array {
  return Float64Array.from({ length: 12 }, (_, n) => Math.sin(seed * (n + 1)));
}

describe('history', () => {
  it('turns the newest change of gradient into the step that made it, also when older pairs are dropped', () => {
    const history = createHistory(12, 3);
    for (let seed = 1; seed <= 5; seed++) {
      const gradient = numbers(seed);
      const direction = gradient.map((value) => -value);
      // A change along the step that is stiffer than expected is remembered as it is.
      const next = gradient.map((value, n) => value - 2 * value + 0.1 * numbers(seed + 7)[n]);
      history.remember(direction, 0.5, gradient, next);
      const change = next.map((value, n) => value - gradient[n]);
      history.apply(change, unchanged);
      for (let n = 0; n < 12; n++) expect(change[n]).toBeCloseTo(0.5 * direction[n], 10);
    }
  });

  it('makes steps longer, but not endless, where the slope did not flatten', () => {
    const gradient = numbers(1);
    const direction = gradient.map((value) => -value);
    for (const steepening of [1, 1.5, 4]) {
      const history = createHistory(12, 3);
      // Without or with negative curvature along the step.
      history.remember(
        direction,
        1,
        gradient,
        gradient.map((value) => steepening * value),
      );
      const next = gradient.slice();
      history.apply(next, unchanged);
      const growth = dot(next, gradient) / dot(gradient, gradient);
      expect(growth).toBeGreaterThan(2);
      expect(growth).toBeLessThan(5);
    }
  });

  it('leaves everything to the initial inverse once it is cleared', () => {
    const history = createHistory(12, 3);
    const gradient = numbers(1);
    const direction = gradient.map((value) => -value);
    history.remember(direction, 1, gradient, numbers(2));
    history.clear();
    const vector = gradient.slice();
    history.apply(vector, (whole) => whole.forEach((value, n) => (whole[n] = 2 * value)));
    expect(vector).toEqual(gradient.map((value) => 2 * value));
  });
});
