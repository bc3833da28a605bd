import { describe, expect, it } from 'vitest';
import { readMolecule } from './read';
import { automorphisms, isAchiral, symmetryClasses } from './symmetry';

const read = (smiles: string) => readMolecule({ smiles });
const heavy = (smiles: string, limit = 5000) =>
  automorphisms(read(smiles), { atoms: 'heavy', limit });

describe('symmetryClasses', () => {
  it('does not depend on the Kekulé structure or the side of a charge', () => {
    const toluene = symmetryClasses(read('Cc1ccccc1'));
    expect(toluene[2]).toBe(toluene[6]);
    expect(toluene[3]).toBe(toluene[5]);
    expect(new Set(toluene.slice(0, 7)).size).toBe(5);
    for (const [smiles, a, b] of [
      ['CC(=O)[O-]', 2, 3],
      ['C[N+](=O)[O-]', 2, 3],
      ['NC(N)=[NH2+]', 0, 3],
      ['CS(=O)(=O)[O-]', 2, 4],
    ] as const) {
      const classes = symmetryClasses(read(smiles));
      expect(classes[a]).toBe(classes[b]);
    }
  });

  it('tells isotopes and surroundings apart', () => {
    const classes = symmetryClasses(read('[2H]CCC'));
    expect(classes[1]).not.toBe(classes[3]);
    expect(new Set(symmetryClasses(read('CCCO')).slice(0, 3)).size).toBe(3);
  });
});

describe('automorphisms', () => {
  it.each([
    // Orders of the symmetry groups of the skeletons; common knowledge, no source.
    ['CCCC', 2],
    ['c1ccccc1', 12],
    ['C12C3C4C1C5C2C3C45', 48],
    ['c1ccc2ccccc2c1', 4],
    ['c1ccccc1-c1ccccc1', 8],
    ['CC(=O)[O-]', 2],
    ['CCOP(=O)([O-])[O-]', 6],
    ['C[N+](=O)[O-]', 2],
    ['NC(N)=[NH2+]', 6],
    ['c1cc[n-]n1', 2],
    ['[cH-]1cccc1', 10],
    ['CC(C)(C)C', 24],
    ['FC(F)(F)C(F)(F)F', 72],
    ['CC(F)(F)F', 6],
    ['CCO', 1],
    // The double bonds of cyclooctatetraene do not move: half of the ring's 16 symmetries.
    ['C1=CC=CC=CC=C1', 8],
    // A cis double bond does not fall on a trans one.
    ['C/C=C/C=C\\C', 1],
    ['C/C=C\\C=C/C', 2],
    // Both forms of a stereocenter are kept apart: the chiral diol has its rotation only.
    ['C[C@H](O)[C@@H](O)C', 2],
    ['C[C@H](O)CC(=O)C[C@H](F)C', 1],
  ])('%s has %i', (smiles, order) => {
    const { automorphisms: found, complete } = heavy(smiles);
    expect(complete).toBe(true);
    expect(found.length).toBe(order);
    expect(new Set(found.map(({ permutation }) => permutation.join())).size).toBe(order);
  });

  it('starts with the identity and keeps bonds and elements', () => {
    const molecule = read('CC(C)c1ccc(cc1)C(=O)[O-]');
    for (const atoms of ['heavy', 'all'] as const) {
      const found = automorphisms(molecule, { atoms, limit: 500 }).automorphisms;
      expect([...found[0].permutation]).toEqual([...Array(molecule.atomCount).keys()]);
      for (const { permutation } of found) {
        expect(new Set(permutation).size).toBe(molecule.atomCount);
        for (const { a, b } of molecule.bonds) {
          expect(
            molecule.neighbors[permutation[a]].some(({ atom }) => atom === permutation[b]),
          ).toBe(true);
        }
      }
    }
  });

  it('exchanges hydrogens when all atoms are asked for', () => {
    const { automorphisms: found, complete } = automorphisms(read('CC'), {
      atoms: 'all',
      limit: 100,
    });
    expect(complete).toBe(true);
    expect(found.length).toBe(72);
    expect(heavy('CC').automorphisms.length).toBe(2);
  });

  it('says which ones keep and which ones invert the configuration', () => {
    const meso = heavy('C[C@H](O)[C@H](O)C').automorphisms;
    expect(meso.map(({ preserves, inverts }) => [preserves, inverts])).toEqual([
      [true, false],
      [false, true],
    ]);
    expect(heavy('CCC').automorphisms.every(({ preserves, inverts }) => preserves && inverts)).toBe(
      true,
    );
  });

  it('stops at its limit and says so', () => {
    const { automorphisms: found, complete } = heavy('FC(F)(F)C(C(F)(F)F)(C(F)(F)F)C(F)(F)F', 100);
    expect(found.length).toBe(100);
    expect(complete).toBe(false);
  });
});

describe('isAchiral', () => {
  it.each([
    ['CCCC', true],
    ['C[C@H](O)[C@H](O)C', true],
    ['C[C@H](O)[C@@H](O)C', false],
    ['N[C@@H](C)C(=O)O', false],
    ['C[C@H]1CC[C@@H](O)CC1', true],
    ['C[C@H]1C[C@H]1C', true],
    ['C[C@@H]1C[C@H]1C', false],
    ['OC[C@@H](O)[C@@H](O)[C@H](O)CO', false],
    ['OC[C@H](O)[C@H](O)[C@H](O)CO', true],
    // with more automorphisms than are tried one by one
    ['FC(F)(F)C(C(F)(F)F)(C(F)(F)F)[C@H](O)[C@@H](O)C(C(F)(F)F)(C(F)(F)F)C(F)(F)F', false],
    ['FC(F)(F)C(C(F)(F)F)(C(F)(F)F)[C@H](O)[C@H](O)C(C(F)(F)F)(C(F)(F)F)C(F)(F)F', true],
  ])('%s: %s', (smiles, expected) => {
    expect(isAchiral(read(smiles))).toBe(expected);
  });
});
