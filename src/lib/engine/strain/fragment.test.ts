import { describe, expect, it } from 'vitest';
import { initialGeometry } from '../conformers/initial-geometry';
import { createForceField } from '../forcefield/create';
import { distance, torsion } from '../geometry';
import { readMolecule } from '../molecule/read';
import { hasRightStereo } from '../molecule/stereo';
import { torsionOfBond } from '../molecule/rotatable';
import { cutFragment } from './fragment';
import type { Fragment } from './fragment';

const SYMBOLS: Readonly<Record<number, string>> = { 1: 'H', 6: 'C', 7: 'N', 8: 'O', 16: 'S' };

async function fragmentOf(smiles: string, j: number, k: number) {
  const molecule = readMolecule({ smiles });
  const x = await initialGeometry(molecule, 1);
  return { molecule, x, fragment: cutFragment(molecule, x, j, k) };
}

/** Molecular formula, carbon first, then the others alphabetically. */
function formula({ molecule }: Fragment): string {
  const counts = new Map<string, number>();
  for (const element of molecule.atomicNumbers) {
    const symbol = SYMBOLS[element];
    counts.set(symbol, (counts.get(symbol) ?? 0) + 1);
  }
  return [...counts]
    .sort(([a], [b]) => a.localeCompare(b))
    .map(([symbol, count]) => symbol + count)
    .join(' ');
}

describe('the fragment around a bond', () => {
  it.each([
    ['butane from the middle of decane', 'CCCCCCCCCC', 4, 5, 'C4 H10'],
    ['biphenyl from a terphenyl', 'c1ccc(cc1)-c1ccc(cc1)-c1ccccc1', 3, 6, 'C12 H10'],
    ['the ortho methyl group stays, the para one goes', 'Cc1ccc(C)c(c1)-c1ccccc1', 6, 8, 'C13 H12'],
    ['N-methylacetamide from a longer amide', 'CCCCC(=O)NCCCC', 4, 6, 'C3 H7 N1 O1'],
    ['a tert-butyl group stays whole', 'CCCCC(C)(C)C', 3, 4, 'C6 H14'],
    ['a sulfonamide uncut', 'CCCCS(=O)(=O)NCCCC', 4, 7, 'C2 H7 N1 O2 S1'],
    ['an alkyl ether beside the bond with a methyl cap', 'CCCCOCCOCCCC', 5, 6, 'C4 H10 O2'],
    ['a fused aromatic system stays whole', 'CCCCc1ccc2ccccc2c1', 3, 4, 'C12 H12'],
  ])('is %s', async (_what, smiles, j, k, expected) => {
    const { fragment } = await fragmentOf(smiles, j, k);
    expect(formula(fragment)).toBe(expected);
  });

  it('keeps the torsion of the molecule', async () => {
    const { molecule, x, fragment } = await fragmentOf('CCC(C)OC(=O)CC(N)c1ccccc1', 4, 5);
    const atoms = torsionOfBond(molecule, 4, 5);
    const [i, j, k, l] = atoms.map((atom) => fragment.indices[atom]);
    expect(torsion(fragment.coordinates, i, j, k, l)).toBe(torsion(x, ...atoms));
  });

  it('puts each cap on the line of the bond it replaces, at the length of a bond to hydrogen', async () => {
    const { fragment } = await fragmentOf('CCCCCCCCCC', 4, 5);
    const { molecule, coordinates } = fragment;
    for (const { a, b } of molecule.bonds) {
      if (molecule.atomicNumbers[b] !== 1) continue;
      expect(distance(coordinates, a, b)).toBeGreaterThan(1.0);
      expect(distance(coordinates, a, b)).toBeLessThan(1.2);
    }
  });

  it.each([
    ['a stereocentre at the bond', 'CC[C@H](C)C(=O)NCC', 4, 6],
    ['one mirrored', 'CC[C@@H](C)C(=O)NCC', 4, 6],
    ['a double bond', 'CCCC/C(C)=C/C(=O)NC', 6, 7],
  ])('keeps the configuration of %s', async (_what, smiles, j, k) => {
    const { fragment } = await fragmentOf(smiles, j, k);
    const { stereocenters, stereobonds } = fragment.molecule;
    expect(stereocenters.length + stereobonds.length).toBe(1);
    expect(hasRightStereo(fragment.molecule, fragment.coordinates)).toBe(true);
  });

  it('keeps formal charges and can be typed', async () => {
    const { fragment } = await fragmentOf('CCC[NH2+]CCc1ccc(C(=O)[O-])cc1', 5, 6);
    const total = fragment.molecule.formalCharges.reduce((sum, charge) => sum + charge, 0);
    const { charges } = createForceField(fragment.molecule);
    expect(charges.reduce((sum, charge) => sum + charge, 0)).toBeCloseTo(total, 6);
  });

  it('of a small molecule is the molecule', async () => {
    const { molecule, fragment } = await fragmentOf('CCCC', 1, 2);
    expect([...fragment.molecule.atomicNumbers]).toEqual([...molecule.atomicNumbers]);
    expect(fragment.molecule.bonds).toEqual(molecule.bonds);
  });
});
