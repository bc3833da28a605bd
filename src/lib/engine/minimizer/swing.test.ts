/** Steps along which bonds swing. */
import { describe, expect, it } from 'vitest';
import { initialGeometry } from '../conformers/initial-geometry';
import { findSkeleton } from '../molecule/skeleton';
import { readMolecule } from '../molecule/read';
import { swing } from './swing';

const molecule = readMolecule({ smiles: 'CC(C)c1ccccc1' });
const skeleton = findSkeleton(molecule);
/** A direction without symmetry, Å. */
const direction = Float64Array.from({ length: 3 * molecule.atomCount }, (_, a) => Math.sin(7 * a));

function bondLengths(x: Float64Array): number[] {
  return Array.from(skeleton.swings, (_, e) => {
    const [p, a] = skeleton.edges.subarray(4 * e);
    return Math.hypot(x[a] - x[p], x[a + 1] - x[p + 1], x[a + 2] - x[p + 2]);
  });
}

describe('swing', () => {
  it('keeps the lengths of bonds that a step does not stretch', async () => {
    const x = await initialGeometry(molecule, 1);
    // Across each bond, as its parent moves along.
    const across = new Float64Array(x.length);
    for (let e = 0; e < skeleton.swings.length; e++) {
      const [p, a] = skeleton.edges.subarray(4 * e);
      across[a] = across[p] + (x[a + 1] - x[p + 1]);
      across[a + 1] = across[p + 1] - (x[a] - x[p]);
      across[a + 2] = across[p + 2];
    }
    const moved = new Float64Array(x.length);
    swing(skeleton, x, 0.4, across, moved);
    const before = bondLengths(x);
    const after = bondLengths(moved);
    for (let e = 0; e < before.length; e++) {
      if (skeleton.swings[e] === 1) expect(after[e]).toBeCloseTo(before[e], 10);
    }
    expect(Math.hypot(...moved.map((value, a) => value - x[a]))).toBeGreaterThan(0.5);
  });

  it('is a straight step to first order, and exactly that without a skeleton', async () => {
    const x = await initialGeometry(molecule, 1);
    const straight = new Float64Array(x.length);
    const swung = new Float64Array(x.length);
    const miss = (step: number): number => {
      swing(undefined, x, step, direction, straight);
      swing(skeleton, x, step, direction, swung);
      return Math.hypot(...swung.map((value, a) => value - straight[a]));
    };
    expect(miss(0.01) / miss(0.005)).toBeCloseTo(4, 1);
    expect(straight).toEqual(x.map((value, a) => value + 0.005 * direction[a]));
  });
});
