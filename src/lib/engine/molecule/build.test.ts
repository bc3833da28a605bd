import { describe, expect, it } from 'vitest';
import { createMolecule } from './build';
import type { Bond } from './molecule';

/** A carbon skeleton from pairs of atoms. */
function skeleton(atomCount: number, pairs: readonly (readonly [number, number])[]) {
  const bonds: Bond[] = pairs.map(([a, b]) => ({ a, b, order: 1 }));
  return createMolecule({ atomicNumbers: new Array<number>(atomCount).fill(6), bonds });
}

/** Pairs of a ring of n atoms from `first`. */
function cycle(first: number, n: number): [number, number][] {
  return Array.from({ length: n }, (_, k) => [first + k, first + ((k + 1) % n)]);
}

const sizes = (rings: readonly (readonly number[])[]) => rings.map((ring) => ring.length).sort();

describe('createMolecule', () => {
  it('lists neighbors and fills in what is left out', () => {
    const water = createMolecule({
      atomicNumbers: [8, 1, 1],
      bonds: [
        { a: 0, b: 1, order: 1 },
        { a: 0, b: 2, order: 1 },
      ],
    });
    expect(water.neighbors[0]).toEqual([
      { atom: 1, bond: 0 },
      { atom: 2, bond: 1 },
    ]);
    expect([...water.formalCharges]).toEqual([0, 0, 0]);
    expect(water.givenAtomCount).toBe(3);
    expect(water.rings).toEqual([]);
    expect(Object.isFrozen(water)).toBe(true);
  });

  it('refuses tables that do not fit together', () => {
    expect(() =>
      createMolecule({ atomicNumbers: [6], bonds: [{ a: 0, b: 1, order: 1 }] }),
    ).toThrow();
    expect(() =>
      createMolecule({ atomicNumbers: [6], formalCharges: [0, 0], bonds: [] }),
    ).toThrow();
  });
});

// Ring counts and sizes follow from the graphs themselves: bonds − atoms + parts rings.
describe('rings', () => {
  it('gives a ring in order, from its lowest atom', () => {
    expect(
      skeleton(5, [
        [0, 2],
        [2, 1],
        [1, 4],
        [4, 3],
        [3, 0],
      ]).rings,
    ).toEqual([[0, 2, 1, 4, 3]]);
  });

  it('keeps chains and linkers out of rings', () => {
    const molecule = skeleton(9, [...cycle(0, 3), [2, 3], [3, 4], ...cycle(4, 4), [7, 8]]);
    expect(sizes(molecule.rings)).toEqual([3, 4]);
    expect([...molecule.ringBonds]).toEqual([1, 1, 1, 0, 0, 1, 1, 1, 1, 0]);
  });

  it('finds the small rings of fused and bridged systems', () => {
    const naphthalene = skeleton(10, [...cycle(0, 10), [0, 5]]);
    expect(sizes(naphthalene.rings)).toEqual([6, 6]);
    const norbornane = skeleton(7, [...cycle(0, 6), [0, 6], [6, 3]]);
    expect(sizes(norbornane.rings)).toEqual([5, 5]);
    const cubane = skeleton(8, [...cycle(0, 4), ...cycle(4, 4), [0, 4], [1, 5], [2, 6], [3, 7]]);
    expect(sizes(cubane.rings)).toEqual([4, 4, 4, 4, 4]);
    const spiro = skeleton(9, [...cycle(0, 5), [0, 5], [5, 6], [6, 7], [7, 8], [8, 0]]);
    expect(sizes(spiro.rings)).toEqual([5, 5]);
  });

  it('handles two separate parts', () => {
    expect(sizes(skeleton(9, [...cycle(0, 3), ...cycle(3, 6)]).rings)).toEqual([3, 6]);
  });

  it('sees a large ring as one ring', () => {
    const ring = skeleton(40, cycle(0, 40));
    expect(sizes(ring.rings)).toEqual([40]);
    expect(ring.ringBonds.every((flag) => flag === 1)).toBe(true);
  });
});
