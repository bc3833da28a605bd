/** Relaxing with torsions held exactly, against what holding means and against a stiff restraint. */
import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { initialGeometry } from '../conformers/initial-geometry';
import { createForceField } from '../forcefield/create';
import { rotateAbout, torsion } from '../geometry';
import { readMolecule } from '../molecule/read';
import { turnBetween } from '../units';
import { minimize } from './minimize';
import { sumTerms, torsionRestraint } from './restraints';
import { orthonormalize } from './rigid-motions';

type Atoms = [number, number, number, number];

async function relaxed(smiles: string) {
  const molecule = readMolecule({ smiles });
  const forceField = createForceField(molecule);
  const options = { gradientRms: 1e-4, maxEvaluations: 5000, curvature: forceField.curvature };
  const x = await initialGeometry(molecule, 1);
  await minimize(forceField.energy, x, options, unattended);
  return { energy: forceField.energy, forceField, options, x };
}

/** The derivatives of a torsion by central differences, of length 1. */
function torsionDirection(x: Float64Array, [i, j, k, l]: Atoms): Float64Array {
  const moved = x.slice();
  const direction = x.map((value, a) => {
    moved[a] = value + 1e-5;
    const ahead = torsion(moved, i, j, k, l);
    moved[a] = value - 1e-5;
    const behind = torsion(moved, i, j, k, l);
    moved[a] = value;
    return turnBetween(behind, ahead);
  });
  orthonormalize(direction, []);
  return direction;
}

const cases: [string, Atoms, number[]][] = [
  ['CCCC', [0, 1, 2, 3], [0, 25, 120, 180, -90]],
  ['CNC(C)=O', [0, 1, 2, 3], [0, 45, 90, 180]],
  ['Cc1ccccc1-c1ccccc1C', [1, 6, 7, 8], [0, 30, 180]],
];

describe.each(cases)('%s with its torsion held', (smiles, atoms, targets) => {
  it('has exactly the target angle, and only the torsion is still under force', async () => {
    const { energy, options, x } = await relaxed(smiles);
    for (const target of targets) {
      const torsions = [{ atoms, target }];
      const result = await minimize(energy, x, { ...options, torsions }, unattended);
      expect(result.converged).toBe(true);
      expect(Math.abs(turnBetween(target, torsion(x, ...atoms)))).toBeLessThan(1e-6);
      const gradient = new Float64Array(x.length);
      expect(energy(x, gradient)).toBe(result.energy);
      const direction = torsionDirection(x, atoms);
      const along = gradient.reduce((sum, value, a) => sum + value * direction[a], 0);
      const rest = gradient.map((value, a) => value - along * direction[a]);
      const rms = Math.sqrt(rest.reduce((sum, value) => sum + value * value, 0) / x.length);
      // The direction by differences is good to about 1e-6 of the force along it.
      expect(rms).toBeLessThan(1.1e-4 + 1e-5 * Math.abs(along));
      expect(result.gradientRms).toBeCloseTo(rms, 4);
    }
  });

  it('has the energy of a stiff restraint, less what the restraint gives way', async () => {
    const { energy, forceField, options, x } = await relaxed(smiles);
    const [target] = targets;
    await minimize(energy, x, { ...options, torsions: [{ atoms, target }] }, unattended);
    const restraint = torsionRestraint(atoms, target, 1000);
    const stiff = sumTerms(forceField, restraint);
    // Both from the exact geometry, so that both end in the same basin.
    const y = x.slice();
    await minimize(stiff.energy, y, { ...options, curvature: stiff.curvature }, unattended);
    const unused = new Float64Array(x.length);
    expect(Math.abs(energy(y, unused) - energy(x, unused))).toBeLessThan(0.005);
  });
});

describe('held torsions', () => {
  it('may be two at once', async () => {
    const { energy, options, x } = await relaxed('CCCCC');
    const torsions = [
      { atoms: [0, 1, 2, 3], target: 100 },
      { atoms: [1, 2, 3, 4], target: -150 },
    ];
    const result = await minimize(energy, x, { ...options, torsions }, unattended);
    expect(result.converged).toBe(true);
    expect(torsion(x, 0, 1, 2, 3)).toBeCloseTo(100, 6);
    expect(torsion(x, 1, 2, 3, 4)).toBeCloseTo(-150, 6);
  });

  it('need no curvature', async () => {
    const { energy, x } = await relaxed('CC');
    rotateAbout(x, [5, 6, 7], 0, 1, -torsion(x, 2, 0, 1, 5) - 3);
    const torsions = [{ atoms: [2, 0, 1, 5], target: 0 }];
    const result = await minimize(
      energy,
      x,
      { gradientRms: 1e-3, maxEvaluations: 5000, torsions },
      unattended,
    );
    expect(result.converged).toBe(true);
    // RDKit 2022.09.3, MMFF94s: ethane -4.73437 staggered, 3.215 higher eclipsed.
    expect(result.energy).toBeCloseTo(-4.73437 + 3.215, 3);
  });
});
