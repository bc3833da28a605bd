/** The arrays handed from one minimization to the next. */
import { describe, expect, it } from 'vitest';
import { heldTorsions, returnWorkspace, takeWorkspace } from './workspace';

describe('workspace', () => {
  it('is handed on without its memory, and never to two at a time', () => {
    const first = takeWorkspace(6, undefined);
    const ones = new Float64Array(6).fill(1);
    first.history.remember(ones, 1, new Float64Array(6).fill(-1), new Float64Array(6).fill(2));
    const shortened = ones.slice();
    first.history.apply(shortened, () => undefined);
    expect(shortened[0]).toBeCloseTo(1 / 3, 12);
    expect(takeWorkspace(6, undefined)).not.toBe(first);
    returnWorkspace(first);
    const again = takeWorkspace(6, undefined);
    expect(again).toBe(first);
    const vector = ones.slice();
    again.history.apply(vector, () => undefined);
    expect(vector).toEqual(ones);
  });

  it('holds the same torsions at new targets, and others anew', () => {
    const workspace = takeWorkspace(12, undefined);
    const atoms = [0, 1, 2, 3];
    // Cis in the plane: the torsion is zero.
    const x = Float64Array.of(1, 1, 0, 1, 0, 0, 0, 0, 0, 0, 1, 0);
    expect(heldTorsions(workspace, [])).toBeNull();
    expect(heldTorsions(workspace, [{ atoms, target: 30 }])?.deviation(x)).toBeCloseTo(30, 9);
    expect(heldTorsions(workspace, [{ atoms, target: 50 }])?.deviation(x)).toBeCloseTo(50, 9);
    const other = { atoms: [3, 2, 1, 0], target: 70 };
    expect(heldTorsions(workspace, [other])?.deviation(x)).toBeCloseTo(70, 9);
    const both = [{ atoms, target: 20 }, other];
    expect(heldTorsions(workspace, both)?.deviation(x)).toBeCloseTo(70, 9);
  });
});
