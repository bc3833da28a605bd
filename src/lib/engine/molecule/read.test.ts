import { describe, expect, it } from 'vitest';
import { InputError } from '../errors';
import { readMolecule } from './read';

const smiles = (text: string) => readMolecule({ smiles: text });

/** The InputError a SMILES leads to. */
function refusal(text: string): InputError {
  try {
    smiles(text);
  } catch (error) {
    if (error instanceof InputError) return error;
    throw error;
  }
  throw new Error(`${text} was accepted`);
}

describe('atoms of a SMILES', () => {
  it('keeps the order of all atoms, explicit hydrogens included', () => {
    const molecule = smiles('[H]C([2H])O[H]');
    expect([...molecule.atomicNumbers]).toEqual([1, 6, 1, 8, 1, 1]);
    expect([...molecule.massNumbers]).toEqual([0, 0, 2, 0, 0, 0]);
    expect(molecule.givenAtomCount).toBe(5);
    expect(molecule.bonds.at(-1)).toEqual({ a: 1, b: 5, order: 1 });
  });

  it('keeps charges and takes the name after a blank', () => {
    const molecule = smiles('  [NH3+]CC(=O)[O-]   glycine, zwitterion ');
    expect(molecule.name).toBe('glycine, zwitterion');
    expect([...molecule.formalCharges.slice(0, 5)]).toEqual([1, 0, 0, 0, -1]);
    expect(molecule.atomCount).toBe(10);
  });

  it('reads ring numbers, branches and isotopes', () => {
    expect(smiles('C%12CC%12').rings).toEqual([[0, 1, 2]]);
    expect(smiles('C1CC1C1CC1').rings.length).toBe(2);
    expect(smiles('[13CH4]').massNumbers[0]).toBe(13);
    expect(smiles('[H][H]').smiles).toBe('[H][H]');
    expect(smiles('[Na+]').atomCount).toBe(1);
  });

  it('writes five-bonded nitrogen with charges', () => {
    for (const [drawn, charged] of [
      ['CN(=O)=O', 'C[N+](=O)[O-]'],
      ['CN=N#N', 'CN=[N+]=[N-]'],
      ['c1ccn(=O)cc1', 'c1cc[n+]([O-])cc1'],
    ]) {
      expect(smiles(drawn).smiles).toBe(smiles(charged).smiles);
    }
  });

  it('is the same molecule with aromatic and alternating bonds', () => {
    for (const [aromatic, alternating] of [
      ['c1ccccc1-c1ccccc1', 'C1=CC=CC=C1C1=CC=CC=C1'],
      ['c1ccccc1c1ccccc1', 'C1=CC=CC=C1C1=CC=CC=C1'],
      ['c1ccc2c(c1)[nH]c1ccccc12', 'C1=CC=C2C(=C1)NC1=CC=CC=C12'],
      ['c1ccc2cccc-2cc1', 'C1=CC=C2C=CC=C2C=C1'],
      ['O=c1cc[nH]cc1', 'O=C1C=CNC=C1'],
      ['[cH-]1cccc1', '[CH-]1C=CC=C1'],
      ['c1cc[se]c1', 'C1=C[Se]C=C1'],
    ]) {
      expect(smiles(aromatic).smiles).toBe(smiles(alternating).smiles);
    }
  });
});

describe('configuration in a SMILES', () => {
  it('follows the order of neighbors, hydrogens and ring digits', () => {
    // Equal by the rules of OpenSMILES 1.0, section 3.8: swapping two neighbors swaps @ and @@.
    for (const [one, other] of [
      ['N[C@@H](C)C(=O)O', 'N[C@H](C(=O)O)C'],
      ['N[C@@H](C)C(=O)O', '[H][C@](N)(C)C(=O)O'],
      ['[C@H](F)(Cl)Br', 'F[C@@H](Cl)Br'],
      ['C[C@H]1CCO1', '[C@H]1(C)CCO1'],
      ['C[S@](=O)CC', 'CC[S@@](=O)C'],
    ]) {
      expect(smiles(one).smiles).toBe(smiles(other).smiles);
    }
    expect(smiles('N[C@@H](C)C(=O)O').smiles).not.toBe(smiles('N[C@H](C)C(=O)O').smiles);
  });

  it('tells E from Z whichever neighbors carry the slashes', () => {
    for (const same of ['F\\C=C\\Cl', 'C(\\F)=C/Cl', 'F/C=C(/[H])Cl'.replace('/[H]', '\\[H]')]) {
      expect(smiles(same).smiles).toBe(smiles('F/C=C/Cl').smiles);
    }
    expect(smiles('F/C=C\\Cl').stereobonds[0].cis).toBe(true);
    expect(smiles('C1CCC/C=C/CC1').stereobonds[0].cis).toBe(false);
  });

  it('drops marks where there is nothing to tell apart', () => {
    for (const text of ['C[C@](C)(F)C', 'C/C(C)=C/C', 'C[N@](CC)CCC', 'C[C@H](C)O']) {
      expect(smiles(text).stereocenters).toEqual([]);
      expect(smiles(text).stereobonds).toEqual([]);
      expect(smiles(text).warnings).toEqual([]);
    }
  });

  it('keeps mutually dependent centers', () => {
    const cis = smiles('C[C@H]1CC[C@@H](O)CC1');
    const trans = smiles('C[C@H]1CC[C@H](O)CC1');
    expect(cis.stereocenters.length).toBe(2);
    expect(cis.smiles).not.toBe(trans.smiles);
  });

  it('warns of what is left open, counting from 1 in words and from 0 in fields', () => {
    const [center] = smiles('CC(F)Cl').warnings;
    expect(center).toMatchObject({ code: 'undefined-stereocenter', atom: 1 });
    expect(center.message).toContain('C2');
    const [bond] = smiles('CC=CC').warnings;
    expect(bond).toMatchObject({ code: 'undefined-double-bond', atom: 1 });
    expect(bond.message).toContain('C2=C3');
    const [allene] = smiles('CC=C=CC').warnings;
    expect(allene.message).toContain('allene');
  });

  it('does not warn where a ring or resonance leaves no choice', () => {
    for (const text of [
      'OC1C2CC3CC(C2)CC1C3',
      'OC(=O)C12C3C4C1C5C2C3C45',
      'C1CN2CCC1CC2',
      'COP(=O)([O-])OCC',
      'C1=CCCCC1',
      'CN(CC)CCC',
    ]) {
      expect(smiles(text).warnings).toEqual([]);
    }
  });
});

describe('what is refused', () => {
  it.each([
    ['', 'empty-input'],
    ['   \n ', 'empty-input'],
    ['CCO.Cl', 'mixture', 3],
    ['[Na+].[Cl-]', 'mixture', 1],
    ['C[Xx]', 'unknown-element', 1],
    ['CC[CH2]', 'radical', 2],
    ['[O][O]', 'radical', 0],
    ['[CH2]', 'radical', 0],
    ['[Na]', 'radical', 0],
    ['CC(C)(C)(C)C', 'valence', 1],
    ['C[N](C)(C)C', 'valence', 1],
    ['[C+5]', 'valence', 0],
    ['c1cccn1', 'valence'],
    ['cc', 'valence', 0],
    ['C*', 'query-feature'],
    ['[R1]C', 'query-feature', 0],
    ['[#6]C', 'query-feature'],
    ['C~C', 'query-feature'],
    ['CC>>CC', 'query-feature'],
    ['CCO |^1:0|', 'query-feature'],
    ['C[Pt@SP1](F)(Cl)Br', 'unsupported-environment', 1],
    ['C1CC/C=C/CC1', 'unsupported-environment'],
    ['C'.repeat(70), 'too-large'],
    ['[H]'.repeat(300), 'too-large'],
    ['C1CC', 'unreadable', 0],
    ['C(C', 'unreadable'],
    ['C)C', 'unreadable'],
    ['C()C', 'unreadable'],
    ['C((C))C', 'unreadable'],
    ['=C', 'unreadable'],
    ['C=', 'unreadable'],
    ['C==C', 'unreadable'],
    ['C11', 'unreadable', 0],
    ['C12CC12', 'unreadable'],
    ['[CH4', 'unreadable'],
    ['[999C]', 'unreadable', 0],
    ['C/C(/C)=C(\\C)/C'.replace('(/C)', '(\\C)'), 'unreadable', 1],
    ['not a molecule', 'unreadable'],
    ['\u0000\u0001', 'unreadable'],
    ['CC\u00e9', 'unreadable'],
    ['CCO\nCCN', 'unreadable'],
  ])('%j: %s', (text, code, atom?: number) => {
    const error = refusal(text);
    expect(error.code).toBe(code);
    expect(error.message).toMatch(/^.{10,250}\.$/);
    if (atom !== undefined) expect(error.atom).toBe(atom);
  });

  it('counts atoms from 1 in its sentence', () => {
    expect(refusal('CC(C)(C)(C)C').message).toBe('C2 has 5 bonds; at most 4 are possible.');
    expect(refusal('CCO.Cl').message).toContain('Cl4');
  });
});
