/** The trees of bonds on which the minimizer's frames hang. */
import { describe, expect, it } from 'vitest';
import type { Molecule } from './molecule';
import { readMolecule } from './read';
import { findSkeleton } from './skeleton';

const molecules = ['CCCC', 'c1ccccc1CO', 'C1CC2CC1CC2', 'C#C', 'Cl'].map((smiles) =>
  readMolecule({ smiles }),
);

/** Two copies of a molecule that are not bonded to each other. */
function twice(molecule: Molecule): Molecule {
  const { atomCount, neighbors, ringBonds } = molecule;
  const bondCount = ringBonds.length;
  const shifted = neighbors.map((list) =>
    list.map((near) => ({ ...near, atom: near.atom + atomCount, bond: near.bond + bondCount })),
  );
  return {
    ...molecule,
    atomCount: 2 * atomCount,
    neighbors: [...neighbors, ...shifted],
    ringBonds: Uint8Array.of(...ringBonds, ...ringBonds),
  };
}
molecules.push(twice(molecules[1]));

/** The edges of a skeleton as atoms, not offsets. */
function edgesOf(skeleton: ReturnType<typeof findSkeleton>) {
  const { edges, swings } = skeleton;
  return Array.from(swings, (swing, e) => {
    const [parent, atom, from, to] = Array.from(edges.subarray(4 * e, 4 * e + 4), (at) => at / 3);
    return { parent, atom, from, to, swings: swing === 1 };
  });
}

describe('skeleton', () => {
  it('reaches every atom once, by a bond and after its parent', () => {
    for (const molecule of molecules) {
      const skeleton = findSkeleton(molecule);
      const reached = new Set(Array.from(skeleton.roots, (root) => root / 3));
      for (const { parent, atom } of edgesOf(skeleton)) {
        expect(reached).toContain(parent);
        expect(reached).not.toContain(atom);
        expect(molecule.neighbors[parent].map((near) => near.atom)).toContain(atom);
        reached.add(atom);
      }
      expect(reached.size).toBe(molecule.atomCount);
    }
  });

  it('has one root for each part that is not bonded to the rest', () => {
    expect(findSkeleton(molecules[1]).roots).toHaveLength(1);
    expect(findSkeleton(twice(molecules[1])).roots).toHaveLength(2);
  });

  it('tells the turn of each bond by a bond beside it, by itself only where there are but two atoms', () => {
    for (const molecule of molecules) {
      for (const { parent, atom, from, to } of edgesOf(findSkeleton(molecule))) {
        expect(molecule.neighbors[from].map((near) => near.atom)).toContain(to);
        expect([parent, atom]).toContain(from);
        expect([parent, atom].includes(to)).toBe(molecule.atomCount === 2);
      }
    }
  });

  it('swings what hangs on bonds outside of rings, and nothing within them', () => {
    for (const molecule of molecules) {
      for (const { parent, atom, swings } of edgesOf(findSkeleton(molecule))) {
        const { bond } = molecule.neighbors[parent].find((near) => near.atom === atom)!;
        expect(swings).toBe(molecule.ringBonds[bond] === 0);
      }
    }
  });
});
