import { describe, expect, it } from 'vitest';
import { initialGeometry } from '../conformers/initial-geometry';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import { torsion as torsionAngle } from '../geometry';
import { readMolecule } from '../molecule/read';
import { createRandom } from '../random';
import { turnBetween } from '../units';
import { applySymmetry, findScanSymmetry, inverseSymmetry } from './scan-symmetry';
import type { TorsionAtoms } from './scan-symmetry';

async function symmetryOf(smiles: string, ...torsions: TorsionAtoms[]) {
  const molecule = readMolecule({ smiles });
  const forceField = createForceField(molecule);
  const x = await initialGeometry(molecule, 1);
  const symmetry = await findScanSymmetry(forceField, torsions, x, createRandom(1), unattended);
  return { forceField, x, symmetry };
}

/** Turns that bring the profile onto itself without mirror, degrees. */
async function shiftsOf(smiles: string, torsion: TorsionAtoms): Promise<number[]> {
  const { symmetry } = await symmetryOf(smiles, torsion);
  const shifts = symmetry.shifting.filter(({ mirror }) => !mirror).map(({ shift }) => shift);
  return shifts.sort((a, b) => a - b);
}

describe('findScanSymmetry', () => {
  it.each([
    ['CC', [2, 0, 1, 5]],
    ['CCCC', [0, 1, 2, 3]],
    ['c1ccccc1-c1ccccc1', [0, 5, 6, 7]],
    ['CC(=O)NC', [0, 1, 3, 4]],
    ['Cc1ccccc1-c1ccccc1C', [1, 6, 7, 8]],
    // Meso: the mirror exchanges the two halves.
    ['C[C@H](O)[C@H](O)C', [0, 1, 3, 5]],
  ] satisfies [string, TorsionAtoms][])('finds the mirror of %s', async (smiles, torsion) => {
    const { symmetry, x, forceField } = await symmetryOf(smiles, torsion);
    expect(symmetry.exact).toHaveLength(1);
    const [mirror] = symmetry.exact;
    const image = new Float64Array(x.length);
    applySymmetry(mirror, x, image);
    expect(torsionAngle(image, ...torsion)).toBeCloseTo(-torsionAngle(x, ...torsion), 8);
    const gradient = new Float64Array(x.length);
    expect(forceField.energy(image, gradient)).toBeCloseTo(forceField.energy(x, gradient), 6);
    const back = new Float64Array(x.length);
    applySymmetry(inverseSymmetry(mirror), image, back);
    expect(back).toEqual(x);
  });

  it.each([
    ['C[C@H](O)[C@@H](O)C', [0, 1, 3, 5]],
    ['C[C@H](Cl)CC', [0, 1, 3, 4]],
    // Achiral, but its two methyls, labelled, cannot change places by turning bonds.
    ['CCC(C)C', [3, 2, 1, 0]],
  ] satisfies [string, TorsionAtoms][])('finds no mirror in %s', async (smiles, torsion) => {
    const { symmetry } = await symmetryOf(smiles, torsion);
    expect(symmetry.exact).toEqual([]);
  });

  it('finds the turns of symmetric ends', async () => {
    expect(await shiftsOf('CC', [2, 0, 1, 5])).toEqual([120, 240]);
    expect(await shiftsOf('c1ccccc1-c1ccccc1', [0, 5, 6, 7])).toEqual([180]);
    expect(await shiftsOf('Cc1ccccc1', [7, 0, 1, 2])).toEqual([60, 120, 180, 240, 300]);
    expect(await shiftsOf('CCCC', [0, 1, 2, 3])).toEqual([]);
    expect(await shiftsOf('CC(C)(C)CC', [0, 1, 4, 5])).toEqual([120, 240]);
    // One ring is not symmetric, the other is.
    expect(await shiftsOf('c1ccccc1-c1ccccn1', [0, 5, 6, 7])).toEqual([180]);
  });

  it('sends shifted torsions where it says, up to distortion', async () => {
    const torsion: TorsionAtoms = [2, 0, 1, 5];
    const { symmetry, x } = await symmetryOf('CC', torsion);
    const image = new Float64Array(x.length);
    for (const operation of symmetry.shifting) {
      applySymmetry(operation, x, image);
      const from = torsionAngle(x, ...torsion) * (operation.mirror ? -1 : 1);
      const off = turnBetween(from + operation.shift, torsionAngle(image, ...torsion));
      expect(Math.abs(off)).toBeLessThan(20);
    }
  });

  it('exchanges the two bonds of a map', async () => {
    const torsions: TorsionAtoms[] = [
      [0, 1, 2, 3],
      [1, 2, 3, 4],
    ];
    const { symmetry, x } = await symmetryOf('CCCCC', ...torsions);
    expect(symmetry.exact.map(({ from, sign }) => [...from, sign]).sort()).toEqual([
      [0, 1, -1],
      [1, 0, -1],
      [1, 0, 1],
    ]);
    const image = new Float64Array(x.length);
    for (const operation of symmetry.exact) {
      applySymmetry(operation, x, image);
      torsions.forEach((atoms, t) => {
        const origin = torsionAngle(x, ...torsions[operation.from[t]]);
        expect(torsionAngle(image, ...atoms)).toBeCloseTo(operation.sign * origin, 8);
      });
    }
  });
});
