import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createPeriodicCurve } from './periodic-curve';

const grid = Array.from({ length: 24 }, (_, i) => -165 + 15 * i);

describe('createPeriodicCurve', () => {
  it('goes through its points, wherever the turn is counted from', () => {
    const values = grid.map((angle) => Math.sin(angle) * 3);
    const curve = createPeriodicCurve(grid, values);
    grid.forEach((angle, i) => {
      expect(curve.at(angle)).toBeCloseTo(values[i], 12);
      expect(curve.at(angle + 720)).toBeCloseTo(values[i], 12);
    });
  });

  it('follows a threefold cosine between its points', () => {
    const threefold = (angle: number) => 1.5 * (1 + Math.cos((3 * angle * Math.PI) / 180));
    const curve = createPeriodicCurve(grid, grid.map(threefold));
    for (let angle = -180; angle <= 180; angle++) {
      expect(Math.abs(curve.at(angle) - threefold(angle))).toBeLessThan(0.05);
    }
  });

  it('joins the last point to the first without a step', () => {
    const curve = createPeriodicCurve([-100, 20, 140], [1, 5, 2]);
    expect(curve.at(180)).toBeCloseTo(curve.at(-180 + 1e-9), 6);
    expect(curve.at(140 + 60)).toBeGreaterThan(1);
    expect(curve.at(140 + 60)).toBeLessThan(2);
  });

  it('never leaves the range of the two points it runs between', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -50, max: 50, noNaN: true }), { minLength: 2, maxLength: 24 }),
        (values) => {
          const angles = values.map((_, i) => -170 + (340 * i) / values.length);
          const curve = createPeriodicCurve(angles, values);
          values.forEach((value, i) => {
            const next = values[(i + 1) % values.length];
            const width =
              i + 1 < values.length ? angles[i + 1] - angles[i] : angles[0] + 360 - angles[i];
            for (let part = 0.1; part < 1; part += 0.2) {
              const between = curve.at(angles[i] + part * width);
              expect(between).toBeGreaterThanOrEqual(Math.min(value, next) - 1e-9);
              expect(between).toBeLessThanOrEqual(Math.max(value, next) + 1e-9);
            }
          });
        },
      ),
    );
  });

  it('keeps the lower of two values at one angle', () => {
    expect(createPeriodicCurve([-180, 180, 0], [3, 2, 1]).at(180)).toBe(2);
  });

  it('refuses to run through nothing', () => {
    expect(() => createPeriodicCurve([], [])).toThrow('at least one point');
  });
});
