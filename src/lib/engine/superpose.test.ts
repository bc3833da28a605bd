import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createRandom } from './random';
import { bestRmsd, superpose } from './superpose';

function cloud(seed: number, atoms: number): Float64Array {
  const random = createRandom(seed);
  return Float64Array.from({ length: 3 * atoms }, () => 3 * random.normal());
}

/** Turns about the three axes in turn and shifts. */
function moved(x: Float64Array, [a, b, c]: number[], shift: number): Float64Array {
  const result = Float64Array.from(x);
  for (const [angle, p, q] of [
    [a, 0, 1],
    [b, 1, 2],
    [c, 0, 2],
  ]) {
    for (let n = 0; n < x.length; n += 3) {
      const [u, v] = [result[n + p], result[n + q]];
      result[n + p] = Math.cos(angle) * u - Math.sin(angle) * v;
      result[n + q] = Math.sin(angle) * u + Math.cos(angle) * v;
    }
  }
  return result.map((value) => value + shift);
}

const all = (x: Float64Array) => Array.from({ length: x.length / 3 }, (_, n) => n);

describe('superpose', () => {
  it('brings a turned and shifted copy back, all atoms of it', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 12 }),
        fc.integer(),
        fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: 3, maxLength: 3 }),
        (atoms, seed, angles) => {
          const fixed = cloud(seed, atoms);
          const moving = moved(fixed, angles, 2.5);
          const { rmsd, coordinates } = superpose(moving, fixed, all(fixed));
          expect(rmsd).toBeLessThan(1e-9);
          coordinates.forEach((value, n) => expect(value).toBeCloseTo(fixed[n], 8));
          expect(bestRmsd(moving, fixed, all(fixed))).toBeLessThan(1e-5);
        },
      ),
      { numRuns: 100 },
    );
  });

  it('carries atoms along that are not fitted', () => {
    const fixed = cloud(4, 6);
    const moving = moved(fixed, [1, 2, 0.5], -4);
    const { coordinates } = superpose(moving, fixed, [0, 1, 2]);
    coordinates.forEach((value, n) => expect(value).toBeCloseTo(fixed[n], 8));
  });

  it('never reflects: a mirror image keeps its distance', () => {
    const fixed = cloud(7, 8);
    const mirror = fixed.map((value, n) => (n % 3 === 0 ? -value : value));
    expect(superpose(mirror, fixed, all(fixed)).rmsd).toBeGreaterThan(0.5);
  });

  it('is never beaten by a nearby rotation', () => {
    const a = cloud(1, 9);
    const b = cloud(2, 9);
    const { rmsd, coordinates } = superpose(a, b, all(a));
    expect(bestRmsd(a, b, all(a))).toBeCloseTo(rmsd, 8);
    const center = [0, 1, 2].map((axis) => all(b).reduce((sum, n) => sum + b[3 * n + axis], 0) / 9);
    const centered = coordinates.map((value, n) => value - center[n % 3]);
    for (let axis = 0; axis < 3; axis++) {
      for (const angle of [-0.05, 0.05]) {
        const angles = [0, 0, 0];
        angles[axis] = angle;
        const turned = moved(centered, angles, 0).map((value, n) => value + center[n % 3]);
        const sum = turned.reduce((total, value, n) => total + (value - b[n]) ** 2, 0);
        expect(Math.sqrt(sum / 9)).toBeGreaterThan(rmsd);
      }
    }
  });

  it('handles points on a line and identical points', () => {
    const line = Float64Array.from([0, 0, 0, 1, 0, 0, 3, 0, 0]);
    const turned = moved(line, [0, 0, Math.PI], 1);
    expect(superpose(turned, line, [0, 1, 2]).rmsd).toBeLessThan(1e-9);
    const same = new Float64Array(9).fill(2);
    expect(superpose(same, same, [0, 1, 2]).rmsd).toBe(0);
  });
});
