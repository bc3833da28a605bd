import { describe, expect, it } from 'vitest';
import { angleOfPoint, arcPath, polarPoint, roundPath } from './polar';

describe('drawing round a circle', () => {
  it.each([
    [0, 0, -10],
    [90, 10, 0],
    [180, 0, 10],
    [-90, -10, 0],
  ])('has %d degrees at (%d, %d), clockwise from the top', (angle, x, y) => {
    const point = polarPoint(angle, 10);
    expect(point[0]).toBeCloseTo(x, 9);
    expect(point[1]).toBeCloseTo(y, 9);
    expect(angleOfPoint(...point)).toBeCloseTo(angle, 9);
  });

  it('draws arcs the way they are asked for', () => {
    expect(arcPath(10, 0, 90)).toBe('M0.00 -10.00 A10 10 0 0 1 10.00 -0.00');
    expect(arcPath(10, 90, -180)).toContain('A10 10 0 1 0');
  });

  it('closes a curve round the circle', () => {
    expect(roundPath(() => 5, 90)).toBe('M-0.00 5.00 L-5.00 -0.00 L0.00 -5.00 L5.00 -0.00 Z');
  });
});
