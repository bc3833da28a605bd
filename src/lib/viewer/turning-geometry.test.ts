import { describe, expect, it } from 'vitest';
import { distance, rotateAbout, torsion, wrapDegrees } from '$lib/engine/light';
import { readMolecule } from '$lib/engine';
import { coordinatesOf } from '$lib/domain/molfile-geometry';
import { compute } from '../../../tests/support/compute';
import type { Skeleton } from './internal-coordinates';
import { createTurningGeometry, type Knot } from './turning-geometry';

function skeletonOf(smiles: string): Skeleton {
  const molecule = readMolecule({ smiles });
  return {
    symbols: Array.from(molecule.atomicNumbers, (number) => (number === 1 ? 'H' : 'X')),
    bonds: molecule.bonds.map(({ a, b, order }) => [a, b, order]),
  };
}

async function scan(smiles: string, bond: [number, number]) {
  const result = await compute({ smiles }, 'scan', { bond, step: 30 });
  const knots = (list: readonly { angle: number; molfile: string }[]): Knot[] =>
    list.map(({ angle, molfile }) => ({ angle, coordinates: coordinatesOf(molfile) }));
  return {
    skeleton: skeletonOf(smiles),
    torsion: result.torsion,
    grid: knots(result.points),
    stationary: knots(result.stationary),
  };
}

/** All distances between atoms: the shape, wherever it lies. */
function distances(x: Float64Array): number[] {
  const atoms = x.length / 3;
  return Array.from({ length: atoms * atoms }, (_, n) =>
    distance(x, n % atoms, Math.floor(n / atoms)),
  );
}
const largestDifference = (a: readonly number[], b: readonly number[]) =>
  Math.max(...a.map((value, n) => Math.abs(value - b[n])));

describe('the shape between the points of a scan', async () => {
  // A straight chain of four atoms, a ring and a methyl group to carry along.
  const smiles = 'CC#CCCC1CCCC1';
  const { skeleton, torsion: own, grid, stationary } = await scan(smiles, [3, 4]);
  const turning = createTurningGeometry(skeleton, own, grid, stationary);
  const x = new Float64Array(3 * skeleton.symbols.length);
  const at = (angle: number) => {
    turning.at(angle, x);
    return x.slice();
  };

  it('is the computed one at each point of the grid, with its handedness', () => {
    const [i, j, k, l] = own;
    for (const { angle, coordinates } of grid) {
      const shape = at(angle);
      expect(largestDifference(distances(shape), distances(coordinates))).toBeLessThan(1e-6);
      expect(torsion(shape, i, j, k, l)).toBeCloseTo(torsion(coordinates, i, j, k, l), 6);
      for (let a = 3; a < skeleton.symbols.length; a++) {
        const gap = torsion(shape, a - 3, a - 2, a - 1, a);
        const computed = torsion(coordinates, a - 3, a - 2, a - 1, a);
        // Atoms in a straight line have no torsion to compare.
        if (distance(shape, a - 3, a - 1) + distance(shape, a - 2, a) > 0.5) {
          expect(Math.abs(wrapDegrees(gap - computed))).toBeLessThan(1);
        }
      }
    }
  });

  it('moves no atom by leaps, over the seam at 180 too', () => {
    const within = (angle: number) =>
      turning.jumps.some(({ from, to }) => (angle - from + 360) % 360 <= (to - from + 360) % 360);
    let before = at(-180);
    for (let angle = -179.5; angle <= 180.5; angle += 0.5) {
      const shape = at(angle);
      if (!within(angle))
        expect(Math.max(...shape.map((v, n) => Math.abs(v - before[n])))).toBeLessThan(0.12);
      before = shape;
    }
  });

  it('reaches the angle asked for and keeps the bonds as long as they are', () => {
    const [i, j, k, l] = own;
    for (let angle = -177; angle < 180; angle += 7) {
      const shape = at(angle);
      expect(Math.abs(wrapDegrees(torsion(shape, i, j, k, l) - angle))).toBeLessThan(0.5);
      for (const [a, b] of skeleton.bonds) {
        const lengths = grid.map(({ coordinates }) => distance(coordinates, a, b));
        expect(distance(shape, a, b)).toBeGreaterThan(Math.min(...lengths) - 0.05);
        expect(distance(shape, a, b)).toBeLessThan(Math.max(...lengths) + 0.05);
      }
    }
  });

  it('holds the front still while the rear turns', () => {
    const [i, j, k] = own;
    for (const angle of [-120, 17, 90]) {
      const shape = at(angle);
      expect(shape[3 * i]).toBeCloseTo(0, 9);
      expect(shape[3 * i + 1]).toBeGreaterThan(0.5);
      expect([shape[3 * j], shape[3 * j + 1], shape[3 * k], shape[3 * k + 1]]).toEqual([
        0, 0, 0, 0,
      ]);
      expect(shape[3 * k + 2]).toBeGreaterThan(shape[3 * j + 2]);
    }
  });
});

describe('a neighbor that is another arrangement', () => {
  // The carbons of pentane; the last torsion flips by 120 degrees between two points of the grid.
  const skeleton = skeletonOf('CCCCC');
  const bent = (first: number, second: number): Float64Array => {
    const x = Float64Array.from(
      Array.from({ length: 5 }, (_, n) => [1.26 * n, n % 2 === 0 ? 0 : 0.89, 0]).flat(),
    );
    rotateAbout(x, [3, 4], 1, 2, first - 180);
    rotateAbout(x, [4], 2, 3, second - 180);
    return x;
  };
  const carbons: Skeleton = {
    symbols: Array(5).fill('C') as string[],
    bonds: skeleton.bonds.filter(([a, b]) => a < 5 && b < 5),
  };
  const grid: Knot[] = Array.from({ length: 12 }, (_, n) => {
    const angle = -150 + 30 * n;
    return { angle, coordinates: bent(angle, angle > 45 && angle < 100 ? 60 : 180) };
  });
  const turning = createTurningGeometry(carbons, [0, 1, 2, 3], grid);

  it('is told as a jump, and nothing between is made up', () => {
    expect(turning.jumps).toEqual([
      { from: 30, to: 60 },
      { from: 90, to: 120 },
    ]);
    const x = new Float64Array(15);
    for (const [angle, other] of [
      [40, 180],
      [50, 60],
      [95, 60],
      [110, 180],
    ]) {
      turning.at(angle, x);
      expect(torsion(x, 0, 1, 2, 3)).toBeCloseTo(angle, 6);
      expect(Math.abs(torsion(x, 1, 2, 3, 4))).toBeCloseTo(other, 6);
    }
  });
});
