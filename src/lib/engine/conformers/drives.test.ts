import { describe, expect, it } from 'vitest';
import { distance, torsion } from '../geometry';
import { readMolecule } from '../molecule/read';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { turnBetween } from '../units';
import { findDrives, setTorsion } from './drives';
import { initialGeometry } from './initial-geometry';

/** Numbers of choices, one a drive. */
function choices(smiles: string): number[] {
  const molecule = readMolecule({ smiles });
  return findDrives(molecule, symmetryClasses(molecule)).map(({ angles }) => angles.length);
}

describe('findDrives', () => {
  it('leaves out methyl and its like', () => {
    for (const smiles of ['CC', 'CC(C)(C)C', 'FC(F)(F)c1ccccc1', 'CC#N', 'CC[NH3+]']) {
      expect(choices(smiles), smiles).toEqual([]);
    }
  });

  it('turns saturated bonds, hydroxyl and amino ends to three staggered places', () => {
    for (const smiles of ['CCCC', 'CCO', 'CCN', 'CCS'])
      expect(choices(smiles), smiles).toEqual([3]);
  });

  it('turns amides, esters and acids to both planar places', () => {
    for (const smiles of ['CNC(C)=O', 'COC(C)=O', 'CC(=O)O']) {
      expect(choices(smiles), smiles).toEqual([2]);
    }
  });

  it('turns conjugated bonds to four places, to two where a plane is symmetric', () => {
    expect(choices('C=CC=C')).toEqual([4]);
    expect(choices('C=CC(C)=O')).toEqual([4]);
    expect(choices('C=Cc1ccccc1')).toEqual([2]);
    expect(choices('c1ccccc1-c1ccccc1')).toEqual([2]);
  });

  it('uses the flip of a ring for one of its bonds only', () => {
    expect(choices('CCc1ccc(CC)cc1').sort()).toEqual([3, 6]);
  });

  it('turns about an alkyne once, as about one long bond', () => {
    expect(choices('CCC#CCC')).toEqual([3]);
    expect(choices('CC#CCC')).toEqual([]);
  });

  it('turns the partial double bonds of an amidinium ion', () => {
    expect(choices('CNC(C)=[NH+]C')).toHaveLength(2);
  });
});

describe('setTorsion', () => {
  it('reaches its target and moves nothing else', async () => {
    const molecule = readMolecule({ smiles: 'OCC#CC(Cl)CC=O' });
    const x = await initialGeometry(molecule, 1);
    for (const drive of findDrives(molecule, symmetryClasses(molecule))) {
      const before = x.slice();
      setTorsion(x, drive, 77);
      expect(turnBetween(torsion(x, ...drive.atoms), 77)).toBeCloseTo(0, 6);
      for (const { a, b } of molecule.bonds) {
        expect(distance(x, a, b)).toBeCloseTo(distance(before, a, b), 6);
      }
      for (const atom of drive.atoms.slice(0, 3)) {
        expect(x.slice(3 * atom, 3 * atom + 3)).toEqual(before.slice(3 * atom, 3 * atom + 3));
      }
    }
  });
});
