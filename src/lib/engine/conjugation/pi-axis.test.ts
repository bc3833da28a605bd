import { describe, expect, it } from 'vitest';
import { rotateAbout } from '../geometry';
import { overlapAt, piAxis, twistAbout } from './pi-axis';

/** Two planar three-coordinate atoms 0 and 1 on the x axis; 2 and 3 are bound to 0, 4 and 5 to 1. */
function planarPair(): Float64Array {
  return Float64Array.from([
    0, 0, 0, 1.45, 0, 0, -0.7, 1.2, 0, -0.7, -1.2, 0, 2.15, 1.2, 0, 2.15, -1.2, 0,
  ]);
}

function twist(x: Float64Array): number {
  const axis0 = piAxis(x, 0, [1, 2, 3]);
  const axis1 = piAxis(x, 1, [0, 4, 5]);
  if (!axis0 || !axis1) throw new Error('no axis');
  return twistAbout(x, 0, 1, axis0, axis1) ?? NaN;
}

describe('the twist between two π axes', () => {
  it.each([
    [0, 0],
    [30, 30],
    [90, 90],
    [-60, 60],
    [135, 45],
    [180, 0],
  ])('of planar ends turned by %d° is %d°', (turn, expected) => {
    const x = planarPair();
    rotateAbout(x, [4, 5], 0, 1, turn);
    expect(twist(x)).toBeCloseTo(expected, 6);
  });

  it('does not change when an end becomes pyramidal symmetrically to the bond', () => {
    const x = planarPair();
    rotateAbout(x, [4, 5], 0, 1, 40);
    const flat = twist(x);
    // Both substituents of atom 0 bent by the same small amount to one side.
    x[3 * 2 + 2] = x[3 * 3 + 2] = 0.3;
    expect(twist(x)).toBeCloseTo(flat, 6);
  });

  it('is not defined where an axis lies along the bond', () => {
    expect(twistAbout(planarPair(), 0, 1, [1, 0, 0], [0, 0, 1])).toBeNull();
  });
});

describe('the π axis', () => {
  it('makes equal angles with the three bonds of a pyramidal atom', () => {
    const x = Float64Array.from([0, 0, 0, 1, 0, 0.2, -0.7, 0.9, 0.3, -0.5, -1.1, 0.1]);
    const axis = piAxis(x, 0, [1, 2, 3]);
    if (!axis) throw new Error('no axis');
    const cosines = [1, 2, 3].map((n) => {
      const [px, py, pz] = x.subarray(3 * n, 3 * n + 3);
      return (axis[0] * px + axis[1] * py + axis[2] * pz) / Math.hypot(px, py, pz);
    });
    expect(cosines[1]).toBeCloseTo(cosines[0], 10);
    expect(cosines[2]).toBeCloseTo(cosines[0], 10);
  });

  it('of two bonds is the normal of their plane', () => {
    const x = Float64Array.from([0, 0, 0, 1, 0, 0, 0, 1, 0]);
    expect(piAxis(x, 0, [1, 2])).toEqual([0, 0, 1]);
  });

  it('does not exist at a linear atom nor with a single bond', () => {
    const x = Float64Array.from([0, 0, 0, 1, 0, 0, -1, 0.001, 0]);
    expect(piAxis(x, 0, [1, 2])).toBeNull();
    expect(piAxis(x, 0, [1])).toBeNull();
  });
});

describe('the overlap', () => {
  it.each([
    [0, 1],
    [30, 0.75],
    [45, 0.5],
    [60, 0.25],
    [90, 0],
  ])('at %d° is %d', (degrees, expected) => {
    expect(overlapAt(degrees)).toBeCloseTo(expected, 12);
  });
});
