import { describe, expect, it } from 'vitest';
import { InputError } from '../errors';
import { readMolecule } from './read';
import { checkTorsion, movedAtoms, rotatableBonds, torsionOfBond } from './rotatable';

const read = (smiles: string) => readMolecule({ smiles });
/** The central atoms of each rotatable bond, lower first. */
const bondsOf = (smiles: string, terminal = false) =>
  rotatableBonds(read(smiles), { terminal }).map(({ j, k }) =>
    [j, k].sort((a, b) => a - b).join('-'),
  );

function codeOf(action: () => unknown): string {
  try {
    action();
  } catch (error) {
    if (error instanceof InputError) return error.code;
    throw error;
  }
  return 'accepted';
}

describe('rotatableBonds', () => {
  it.each([
    ['CC', [], ['0-1']],
    ['CCCC', ['1-2'], ['0-1', '1-2', '2-3']],
    ['C=CC=C', ['1-2'], ['1-2']],
    ['c1ccccc1-c1ccccc1', ['5-6'], ['5-6']],
    ['CC#CC', [], []],
    ['CCC#N', [], ['0-1']],
    ['C=C=CC', [], ['2-3']],
    ['C1CCCCC1', [], []],
    ['OO', [], ['0-1']],
    ['CC(=O)NC', ['1-3'], ['0-1', '1-3', '3-4']],
    ['FC(F)(F)c1ccccc1', [], ['1-4']],
    ['O=[N+]([O-])c1ccccc1', ['1-3'], ['1-3']],
    ['CC(C)(C)c1ccccc1', ['1-4'], ['0-1', '1-2', '1-3', '1-4']],
  ])('%s', (smiles, inner, all) => {
    expect(bondsOf(smiles)).toEqual(inner);
    expect(bondsOf(smiles, true)).toEqual(all);
  });

  it('takes the highest-priority substituents, whatever the order of the input', () => {
    const butane = rotatableBonds(read('CCCC'))[0];
    expect(butane.torsion).toEqual([0, 1, 2, 3]);
    // Chlorine before carbon before hydrogen at one end; the carbonyl oxygen at the other.
    for (const [smiles, ends] of [
      ['CC(Cl)C(C)=O', [2, 5]],
      ['O=C(C)C(Cl)C', [0, 4]],
    ] as const) {
      const { torsion } = rotatableBonds(read(smiles))[0];
      expect([torsion[0], torsion[3]].sort()).toEqual([...ends].sort());
    }
    // Outward: ethyl before methyl.
    const [bond] = rotatableBonds(read('CC(CC)C(F)F')).filter(({ j, k }) => j + k === 5);
    expect(bond.torsion.slice(0, 1).concat(bond.torsion[3])).toContain(2);
  });

  it('marks conjugation and linkages', () => {
    const kinds = (smiles: string) =>
      rotatableBonds(read(smiles)).map(({ conjugated, linkage }) => [conjugated, linkage]);
    expect(kinds('C=CC=C')).toEqual([[true, null]]);
    expect(kinds('CC(=O)NC')).toEqual([[true, 'amide']]);
    expect(kinds('CC(=O)OC')).toEqual([[true, 'ester']]);
    expect(kinds('COc1ccccc1')).toEqual([[true, null]]);
    expect(kinds('CCCC')).toEqual([[false, null]]);
    expect(kinds('CCS(=O)(=O)C')).toEqual([[false, null]]);
  });
});

describe('torsions chosen by hand', () => {
  it('finds the torsion of a bond in the direction asked for', () => {
    expect(torsionOfBond(read('CCCC'), 2, 1)).toEqual([3, 2, 1, 0]);
    expect(torsionOfBond(read('CO'), 0, 1).slice(1)).toEqual([0, 1, 5]);
  });

  it('moves the side of the second atom', () => {
    const molecule = read('CCO');
    expect([...movedAtoms(molecule, 0, 1)].sort()).toEqual([1, 2, 6, 7, 8].sort());
    expect([...movedAtoms(molecule, 1, 0)].sort()).toEqual([0, 3, 4, 5].sort());
    expect(codeOf(() => movedAtoms(read('C1CC1'), 0, 1))).toBe('bad-torsion');
  });

  it('checks torsions', () => {
    const molecule = read('CC(C)C=C');
    expect(codeOf(() => checkTorsion(molecule, [0, 1, 3, 4]))).toBe('accepted');
    expect(codeOf(() => checkTorsion(molecule, [0, 1, 0, 4]))).toBe('bad-torsion');
    expect(codeOf(() => checkTorsion(molecule, [0, 1, 2, 4]))).toBe('bad-torsion');
    expect(codeOf(() => checkTorsion(molecule, [4, 1, 3, 0]))).toBe('bad-torsion');
    expect(codeOf(() => checkTorsion(molecule, [0, 1, 3, 99]))).toBe('bad-torsion');
    expect(codeOf(() => checkTorsion(molecule, [0, 1, 3, 1.5]))).toBe('bad-torsion');
    expect(codeOf(() => torsionOfBond(molecule, 0, 3))).toBe('no-such-bond');
    expect(codeOf(() => torsionOfBond(molecule, 3, 4))).toBe('bad-torsion');
    expect(codeOf(() => torsionOfBond(read('CCC#N'), 1, 2))).toBe('bad-torsion');
    expect(codeOf(() => torsionOfBond(read('CF'), 0, 1))).toBe('bad-torsion');
    expect(codeOf(() => torsionOfBond(read('C1CCC1'), 0, 1))).toBe('bad-torsion');
  });
});
