import { describe, expect, it } from 'vitest';
import { readMolecule } from '../molecule/read';
import { findConjugatedBonds } from './conjugated-bonds';

function bondsOf(smiles: string): string[] {
  return findConjugatedBonds(readMolecule({ smiles })).map(
    ({ j, k, kind, inRing }) => `${j}-${k} ${kind}${inRing ? ' in ring' : ''}`,
  );
}

// Textbook names of the functional groups; no single source.
describe('the conjugated bonds', () => {
  it.each([
    ['buta-1,3-diene', 'C=CC=C', ['1-2 diene']],
    ['acrolein', 'C=CC=O', ['1-2 enone']],
    ['glyoxal', 'O=CC=O', ['1-2 dicarbonyl']],
    ['1-azadiene', 'C=CC=N', ['1-2 heterodiene']],
    ['an azine', 'C=NN=C', ['1-2 heterodiene']],
    ['styrene', 'C=Cc1ccccc1', ['1-2 vinylarene']],
    ['benzaldehyde', 'O=Cc1ccccc1', ['1-2 aryl carbonyl']],
    ['biphenyl', 'c1ccccc1-c1ccccc1', ['5-6 biaryl']],
    ["2,2'-bithiophene", 'c1ccsc1-c1cccs1', ['4-5 biaryl']],
    ['N-methylacetamide', 'CC(=O)NC', ['1-3 amide']],
    ['N-acetylpyrrole', 'CC(=O)n1cccc1', ['1-3 amide']],
    ['methyl acetate', 'CC(=O)OC', ['1-3 ester']],
    ['acetic acid', 'CC(=O)O', ['1-3 carboxylic acid']],
    ['aniline', 'Nc1ccccc1', ['0-1 aniline']],
    ['anisole', 'COc1ccccc1', ['1-2 aryl ether']],
    ['phenol', 'Oc1ccccc1', ['0-1 phenol']],
    ['methyl vinyl ether', 'COC=C', ['1-2 enol ether']],
    ['acetamidine', 'CC(=N)N', ['1-3 amidine']],
    ['nitrobenzene', 'O=[N+]([O-])c1ccccc1', ['1-3 other']],
    ['vinylallene', 'C=C=CC=C', ['2-3 diene']],
    ['cyclopentadiene', 'C1=CC=CC1', ['1-2 diene in ring']],
    ['2-pyrrolidinone', 'O=C1CCCN1', ['1-5 amide in ring']],
  ])('of %s', (_name, smiles, expected) => {
    expect(bondsOf(smiles)).toEqual(expected);
  });

  it.each([
    ['ethane', 'CC'],
    ['benzene', 'c1ccccc1'],
    ['naphthalene', 'c1ccc2ccccc2c1'],
    ['penta-1,4-diene', 'C=CCC=C'],
    ['vinylacetylene, whose linear end has no plane', 'C=CC#C'],
    ['acrylonitrile', 'C=CC#N'],
    ['anilinium, whose lone pair is used', '[NH3+]c1ccccc1'],
    ['a carboxylate, whose oxygens bear nothing to turn', 'CC(=O)[O-]'],
    ['hydrazine, two lone pairs', 'NN'],
    ['benzenesulfonamide, whose sulfur has no p orbital to share', 'NS(=O)(=O)c1ccccc1'],
  ])('are none in %s', (_name, smiles) => {
    expect(bondsOf(smiles)).toEqual([]);
  });

  it('of a diene come with the torsion over both double bonds', () => {
    const [bond] = findConjugatedBonds(readMolecule({ smiles: 'CC(=C)C(=C)C' }));
    expect(bond.dieneTorsion).toEqual([2, 1, 3, 4]);
  });
});
