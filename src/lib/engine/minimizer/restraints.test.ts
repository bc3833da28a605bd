import { describe, expect, it } from 'vitest';
import { gradientError } from '../../../../tests/support/gradient';
import { unattended } from '../control';
import { initialGeometry } from '../conformers/initial-geometry';
import { createForceField } from '../forcefield/create';
import { distance, torsion } from '../geometry';
import { readMolecule } from '../molecule/read';
import { createRandom } from '../random';
import { turnBetween } from '../units';
import { minimize } from './minimize';
import { holdAtoms, positionTethers, sumTerms, torsionRestraint } from './restraints';

/** A chain of four with bonds of 1.5 Å, right angles and a torsion in degrees. */
function chain(degrees: number): Float64Array {
  const t = (degrees * Math.PI) / 180;
  return Float64Array.of(0, 1.5, 0, 0, 0, 0, 1.5, 0, 0, 1.5, 1.5 * Math.cos(t), 1.5 * Math.sin(t));
}

async function prepare(smiles: string) {
  const molecule = readMolecule({ smiles });
  return { forceField: createForceField(molecule), x: await initialGeometry(molecule, 1) };
}

const options = { gradientRms: 0.001, maxEvaluations: 5000 };

describe('torsionRestraint', () => {
  it.each([
    [0, 0],
    [0, 5],
    [180, 180],
    [180, -179.9],
    [-175, 178],
    [60, -100],
    [120, 0],
    [0, 179],
  ])('towards %d has the gradient of its energy at %d degrees', (target, at) => {
    const { energy } = torsionRestraint([0, 1, 2, 3], target, 0.01);
    expect(gradientError(energy, chain(at), 1e-6)).toBeLessThan(1e-5);
  });

  it('counts the shortest turn, also across 180 degrees', () => {
    const { energy } = torsionRestraint([0, 1, 2, 3], -175, 2);
    expect(energy(chain(179), new Float64Array(12))).toBeCloseTo(36, 8);
  });

  it('is finite where three atoms are in line', () => {
    const x = Float64Array.of(-1, 0, 0, 0, 0, 0, 1.5, 0, 0, 2, 1, 0);
    const gradient = new Float64Array(12);
    const value = torsionRestraint([0, 1, 2, 3], 90).energy(x, gradient);
    expect([value, ...gradient].every(Number.isFinite)).toBe(true);
  });

  // Butane eclipsed and at its steepest, the amide out of its plane, a biaryl pressed flat.
  it.each([
    ['CCCC', [0, 1, 2, 3], [0, 25, 120, 180, -90]],
    ['CNC(C)=O', [0, 1, 2, 3], [0, 45, 90, 180]],
    ['Cc1ccccc1-c1ccccc1C', [1, 6, 7, 8], [0, 30, 180]],
  ])('brings %s to every target within 0.1 degrees', async (smiles, [i, j, k, l], targets) => {
    const { forceField, x } = await prepare(smiles);
    for (const target of targets) {
      const held = sumTerms(forceField, torsionRestraint([i, j, k, l], target));
      const { converged } = await minimize(
        held.energy,
        x,
        { ...options, curvature: held.curvature },
        unattended,
      );
      expect(converged).toBe(true);
      expect(Math.abs(turnBetween(target, torsion(x, i, j, k, l)))).toBeLessThan(0.1);
    }
  });
});

describe('positionTethers', () => {
  const reference = chain(50);

  it('is flat within its radius', () => {
    const { energy } = positionTethers(reference, [0, 2], 0.3, 10);
    const x = reference.map((value, a) => value + (a % 3 === 0 ? 0.29 : 0));
    const gradient = new Float64Array(12);
    expect(energy(x, gradient)).toBe(0);
    expect(gradient.every((value) => value === 0)).toBe(true);
  });

  it('pulls the atoms it ties, and only those, with the gradient of its energy', () => {
    const { energy } = positionTethers(reference, [0, 2], 0.3, 10);
    const random = createRandom(3);
    const x = reference.map((value) => value + random.normal());
    expect(gradientError(energy, x)).toBeLessThan(1e-7);
    const gradient = new Float64Array(12);
    energy(x, gradient);
    expect([...gradient.subarray(3, 6), ...gradient.subarray(9)]).toEqual([0, 0, 0, 0, 0, 0]);
  });

  it('is half the force times the square of the way beyond', () => {
    const { energy } = positionTethers(reference, [1], 0.3, 10);
    const x = reference.slice();
    x[4] += 0.5;
    expect(energy(x, new Float64Array(12))).toBeCloseTo(0.5 * 10 * 0.04, 12);
  });

  it('keeps heavy atoms near their places while the rest relaxes', async () => {
    const { forceField, x } = await prepare('CC(C)CC(=O)O');
    const random = createRandom(9);
    const start = x.map((value) => value + 0.1 * random.normal());
    x.set(start);
    const heavy = [0, 1, 2, 3, 4, 5, 6];
    const tied = sumTerms(forceField, positionTethers(start, heavy, 0.1, 500));
    const { converged } = await minimize(
      tied.energy,
      x,
      { ...options, curvature: tied.curvature },
      unattended,
    );
    expect(converged).toBe(true);
    for (const atom of heavy) {
      const both = Float64Array.of(
        ...x.subarray(3 * atom, 3 * atom + 3),
        ...start.subarray(3 * atom, 3 * atom + 3),
      );
      // 0.1 Å and the little that the strain can stretch a tether of 500 kcal/mol/Å².
      expect(distance(both, 0, 1)).toBeLessThan(0.2);
    }
  });
});

describe('holdAtoms', () => {
  it('relaxes the other atoms and leaves the held ones exactly in place', async () => {
    const { forceField, x } = await prepare('OCC(=O)N');
    const start = x.slice();
    const { atomicNumbers } = forceField.molecule;
    const heavy = Array.from(atomicNumbers.keys()).filter((atom) => atomicNumbers[atom] > 1);
    const held = holdAtoms(forceField, heavy);
    const result = await minimize(
      held.energy,
      x,
      { ...options, curvature: held.curvature },
      unattended,
    );
    expect(result.converged).toBe(true);
    expect(result.energy).toBe(forceField.energy(x, new Float64Array(x.length)));
    expect(result.energy).toBeLessThan(forceField.energy(start, new Float64Array(x.length)) - 0.01);
    for (const atom of heavy) {
      expect(x.subarray(3 * atom, 3 * atom + 3)).toEqual(start.subarray(3 * atom, 3 * atom + 3));
    }
  });
});
