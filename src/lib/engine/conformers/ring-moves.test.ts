import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import { distance, torsion } from '../geometry';
import { minimize } from '../minimizer/minimize';
import { readMolecule } from '../molecule/read';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { initialGeometry } from './initial-geometry';
import { findInversions, invert, pyramid } from './inversions';
import { findRingMoves, flap } from './ring-moves';

describe('ring moves', () => {
  it('finds corners and edges of flexible rings and leaves flat and double-bonded parts alone', () => {
    const count = (smiles: string): number => findRingMoves(readMolecule({ smiles })).length;
    expect(count('C1CCCCC1')).toBe(12);
    expect(count('c1ccccc1')).toBe(0);
    expect(count('C1CC1')).toBe(0);
    expect(count('C1CCC=CC1')).toBeLessThan(12);
  });

  it('takes chair cyclohexane to a boat and keeps every bond of the arc', async () => {
    const molecule = readMolecule({ smiles: 'C1CCCCC1' });
    const { energy, curvature, skeleton } = createForceField(molecule);
    const options = { gradientRms: 0.01, maxEvaluations: 2000, curvature, skeleton };
    const x = await initialGeometry(molecule, 1);
    await minimize(energy, x, options, unattended);
    const signs = (): string =>
      [0, 1, 2, 3, 4, 5]
        .map((n) => Math.sign(torsion(x, n, (n + 1) % 6, (n + 2) % 6, (n + 3) % 6)))
        .join();
    const start = signs();
    const [corner] = findRingMoves(molecule);
    const before = x.slice();
    flap(x, corner);
    for (const atom of corner.moving) {
      for (const end of [...corner.axis, ...corner.moving]) {
        expect(distance(x, atom, end)).toBeCloseTo(distance(before, atom, end), 6);
      }
    }
    await minimize(energy, x, options, unattended);
    expect(signs()).not.toBe(start);
  });
});

describe('inversions', () => {
  it('finds amines whose inversion makes a different conformer', () => {
    const find = (smiles: string): number[] => {
      const molecule = readMolecule({ smiles });
      return findInversions(molecule, symmetryClasses(molecule)).map(({ nitrogen }) => nitrogen);
    };
    expect(find('CN1CCCCC1')).toEqual([1]);
    expect(find('C1CCNCC1')).toEqual([3]);
    expect(find('CNCC')).toEqual([1]);
    expect(find('CN(C)CC')).toEqual([]);
    expect(find('CC(=O)N1CCCCC1')).toEqual([]);
    expect(find('C1CN2CCC1CC2')).toEqual([]);
  });

  it('turns the pyramid over without touching bond lengths', async () => {
    const molecule = readMolecule({ smiles: 'CCN1CCCCC1' });
    const x = await initialGeometry(molecule, 1);
    const [inversion] = findInversions(molecule, symmetryClasses(molecule));
    const before = x.slice();
    invert(x, inversion);
    expect(pyramid(x, inversion)).toBeCloseTo(-pyramid(before, inversion), 6);
    for (const { a, b } of molecule.bonds) {
      expect(distance(x, a, b)).toBeCloseTo(distance(before, a, b), 6);
    }
  });
});
