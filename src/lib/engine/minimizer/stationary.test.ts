import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { initialGeometry } from '../conformers/initial-geometry';
import { createForceField } from '../forcefield/create';
import { readMolecule } from '../molecule/read';
import { diagonalize } from './eigen';
import { differenceHessian } from './hessian';
import { minimize } from './minimize';
import { minimizeToMinimum } from './minimize-to-minimum';
import { sumTerms, torsionRestraint } from './restraints';
import { rigidMotions } from './rigid-motions';
import { softestMode } from './stationary';

/** A molecule's force field, options, and a geometry relaxed with one torsion held, where one is given. */
async function prepare(smiles: string, atoms?: [number, number, number, number], degrees = 0) {
  const molecule = readMolecule({ smiles });
  const forceField = createForceField(molecule);
  const x = await initialGeometry(molecule, 1);
  const options = { gradientRms: 1e-5, maxEvaluations: 5000, curvature: forceField.curvature };
  const held = atoms ? sumTerms(forceField, torsionRestraint(atoms, degrees)) : forceField;
  await minimize(held.energy, x, { ...options, curvature: held.curvature }, unattended);
  return { energy: forceField.energy, x, options };
}

/** Eigenvalues of the full Hessian without the six of the rigid motions. */
function internalCurvatures(hessian: Float64Array, x: Float64Array): number[] {
  const lifted = hessian.slice();
  for (const motion of rigidMotions(x)) {
    motion.forEach((u, a) => motion.forEach((v, b) => (lifted[a * x.length + b] += 1e6 * u * v)));
  }
  return [...diagonalize(lifted, x.length).values].slice(0, x.length - 6);
}

const phenylpyridine = 'c1ccccc1-c1ccccn1';
const axis: [number, number, number, number] = [4, 5, 6, 11];

describe('softestMode', () => {
  it.each([
    ['a minimum of butane', 'CCCC', undefined, 1],
    ['eclipsed butane', 'CCCC', [0, 1, 2, 3] as [number, number, number, number], -1],
    ['a minimum of hydroxyacetamide', 'OCC(=O)N', undefined, 1],
    ['planar 2-phenylpyridine', phenylpyridine, axis, -1],
  ])(
    'finds the lowest eigenvalue of the full Hessian at %s',
    async (_name, smiles, atoms, sign) => {
      const { energy, x, options } = await prepare(smiles, atoms);
      const mode = await softestMode(energy, x, options.curvature, unattended);
      const [lowest] = internalCurvatures(await differenceHessian(energy, x, unattended), x);
      expect(Math.sign(lowest)).toBe(sign);
      expect(Math.abs(mode!.curvature - lowest)).toBeLessThan(0.05 * Math.abs(lowest) + 1e-3);
    },
  );

  it('is nothing for what has no internal freedom', async () => {
    const free = (): number => 0;
    const none = (): void => undefined;
    expect(await softestMode(free, Float64Array.of(1, 2, 3), none, unattended)).toBeNull();
  });
});

describe('minimizeToMinimum', () => {
  it('leaves the planar saddle of 2-phenylpyridine', async () => {
    const { energy, x, options } = await prepare(phenylpyridine, axis);
    // RDKit 2022.09.3, MMFF94s: its free minimization stops on the saddle at 42.872.
    expect(energy(x, new Float64Array(x.length))).toBeCloseTo(42.872, 3);
    const result = await minimizeToMinimum(energy, x, options, unattended);
    expect(result.converged).toBe(true);
    expect(result.energy).toBeLessThanOrEqual(42.395);
    expect(
      internalCurvatures(await differenceHessian(energy, x, unattended), x)[0],
    ).toBeGreaterThan(0);
    expect(result.softestCurvature).toBeGreaterThan(0);
  });

  it('goes from eclipsed ethane to the staggered minimum', async () => {
    const { energy, x, options } = await prepare('CC', [2, 0, 1, 5], 0);
    const eclipsed = energy(x, new Float64Array(x.length));
    const result = await minimizeToMinimum(energy, x, options, unattended);
    // RDKit 2022.09.3, MMFF94s: staggered -4.73437 and a barrier of 3.215 kcal/mol.
    expect(result.energy).toBeCloseTo(-4.73437, 4);
    expect(eclipsed - result.energy).toBeCloseTo(3.215, 2);
  });

  it('stays at a minimum and says how soft it is', async () => {
    const { energy, x, options } = await prepare('CCO');
    const before = x.slice();
    const result = await minimizeToMinimum(energy, x, options, unattended);
    expect(result.converged).toBe(true);
    expect(x).toEqual(before);
    expect(result.softestCurvature).toBeGreaterThan(0.1);
  });
});
