import { describe, expect, it } from 'vitest';
import { readMolecule } from './read';
import { stereoisomers } from './stereoisomers';

const isomersOf = (smiles: string, limit = 16) =>
  stereoisomers(readMolecule({ smiles }), limit)?.map((isomer) => isomer.smiles);

describe('stereoisomers', () => {
  // Counts of stereoisomers are textbook facts: common practice, no source.
  it.each([
    ['CCO', 1],
    ['CC(F)Cl', 2],
    ['C[C@H](F)Cl', 1],
    ['CC=CC', 2],
    ['CC(O)C(C)O', 3],
    ['OC(=O)C(O)C(O)C(=O)O', 3],
    ['CC(Cl)C(Br)C(F)O', 8],
    ['CC=CC(F)Cl', 4],
    ['CC1CCC(C)CC1', 2],
    ['CC=CC=CC', 3],
  ])('%s has %i', (smiles, count) => {
    expect(isomersOf(smiles)).toHaveLength(count);
  });

  it('keeps what is stated', () => {
    const isomers = isomersOf('C[C@H](F)C(Cl)Br')!;
    expect(isomers).toHaveLength(2);
    expect(new Set(isomers.map((smiles) => readMolecule({ smiles }).stereocenters.length))).toEqual(
      new Set([2]),
    );
  });

  it('returns isomers that read back as themselves and leave nothing open', () => {
    for (const smiles of isomersOf('CC(O)C=CC')!) {
      const molecule = readMolecule({ smiles });
      expect(molecule.smiles).toBe(smiles);
      expect(molecule.warnings.map(({ code }) => code)).not.toContain('undefined-stereocenter');
      expect(molecule.warnings.map(({ code }) => code)).not.toContain('undefined-double-bond');
    }
  });

  it('says when there are too many', () => {
    expect(isomersOf('CC(Cl)C(Br)C(F)O', 7)).toBeUndefined();
    expect(isomersOf('OCC(O)C(O)C(O)C(O)C(O)C(O)C(O)C(O)C(O)C=O', 16)).toBeUndefined();
  });
});
