import { describe, expect, it } from 'vitest';
import { readMolecule } from './read';
import { FINGERPRINT_BITS, fingerprintOf, readPattern } from './substructure';

const structures = [
  'CC(=O)Nc1ccc(O)cc1',
  'C=CC=C',
  'c1ccsc1-c1cccs1',
  'CN1C=NC2=C1C(=O)N(C(=O)N2C)C',
  'CC(C)(C)C(=O)O',
  'C1CCC2CCCCC2C1',
  'C[N+](C)(C)CC(=O)[O-]',
  'FC(F)(F)c1ccncc1',
  'CC#CC',
  'OC1CCCCC1',
  'c1ccccc1-c1ccccc1',
  'Cc1cc[nH]c1',
].map((smiles) => readMolecule({ smiles }).smiles);

/** Which of the structures hold each SMARTS, in their order: RDKit 2022.09.3, HasSubstructMatch. */
const expected = [
  ['c1ccccc1', '100000000010'],
  ['[#7]', '100100110001'],
  ['[N+]', '000000100000'],
  ['C(F)(F)F', '000000010000'],
  ['[#6;R]', '101101010111'],
  ['[#6;!R]', '110110111001'],
  ['[OH]', '100010000100'],
  ['C#C', '000000001000'],
  ['c1ccccc1-c1ccccc1', '000000000010'],
  ['c1ccsc1-c1cccs1', '001000000000'],
  ['[#6]~[#6]~[#8]', '100110100100'],
  ['[!#6;!#1]', '101110110101'],
  ['C1CCCCC1', '000001000100'],
  ['[#7,#8]~[#6]', '100110110101'],
  ['c1ccncc1', '000000010000'],
  ['c1cc[nH]c1', '000000000001'],
  ['CC(=O)O', '000010100000'],
  ['C[N+](C)(C)C', '000000100000'],
  ['[CH3]', '100110101001'],
  ['[#6]=[#8]', '100110100000'],
  ['OC1CCCCC1', '000000000100'],
  ['[#6]#[#6]', '000000001000'],
  ['c1cccs1', '001000000000'],
] as const;

describe('a pattern', () => {
  it.each(expected)('%s is in the structures that RDKit finds', (smarts, hits) => {
    const pattern = readPattern(smarts);
    expect(structures.map((smiles) => (pattern.isIn(smiles) ? '1' : '0')).join('')).toBe(hits);
  });

  it.each(expected)('%s has no key that a structure with it lacks', (smarts, hits) => {
    const { fingerprint } = readPattern(smarts);
    expect(fingerprint).toMatch(new RegExp(`^[01]{${FINGERPRINT_BITS}}$`));
    structures.forEach((smiles, n) => {
      if (hits[n] === '0') return;
      const own = fingerprintOf(smiles);
      const missing = [...fingerprint].filter((bit, place) => bit === '1' && own[place] === '0');
      expect(missing, smiles).toEqual([]);
    });
  });

  it('is refused with a reason when it cannot be taken', () => {
    for (const [text, code] of [
      ['', 'empty-input'],
      ['C1CC', 'unreadable'],
      ['((', 'unreadable'],
      ['C C', 'unreadable'],
      ['[D3]', 'unreadable'],
      // Read in another way than SMARTS means them, which would find other molecules.
      ['cc', 'query-feature'],
      ['c-c', 'query-feature'],
      ['[#6]1~[#6]~[#6]~[#6]~[#6]~[#6]1', 'query-feature'],
      ['C'.repeat(81), 'too-large'],
      ['C'.repeat(401), 'too-large'],
    ]) {
      expect(() => readPattern(text), text).toThrow(expect.objectContaining({ code }));
    }
  });
});
