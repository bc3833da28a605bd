import { describe, expect, it } from 'vitest';
import { createControl, unattended } from '../control';
import type { EnergyTerm } from '../energy-term';
import { initialGeometry } from '../conformers/initial-geometry';
import { createForceField } from '../forcefield/create';
import { readMolecule } from '../molecule/read';
import { createRandom } from '../random';
import { minimize, rootMeanSquare } from './minimize';

const tight = { gradientRms: 1e-6, maxEvaluations: 5000 };

/** A molecule's force field, a rough start, and options that steer by its curvature. */
async function prepare(smiles: string) {
  const molecule = readMolecule({ smiles });
  const { energy, curvature } = createForceField(molecule);
  return { energy, x: await initialGeometry(molecule, 1), options: { ...tight, curvature } };
}

function gradientRms(energy: EnergyTerm, x: Float64Array): number {
  const gradient = new Float64Array(x.length);
  energy(x, gradient);
  return rootMeanSquare(gradient);
}

/** Rosenbrock's valley in pairs of coordinates (Comput. J. 1960, 3, 175); its minimum is 0 where all are 1. */
const rosenbrock: EnergyTerm = (x, gradient) => {
  let energy = 0;
  for (let a = 0; a < x.length; a += 2) {
    const across = x[a + 1] - x[a] * x[a];
    energy += 100 * across * across + (1 - x[a]) ** 2;
    gradient[a] += -400 * across * x[a] - 2 * (1 - x[a]);
    gradient[a + 1] += 200 * across;
  }
  return energy;
};
const valleyStart = [-1.2, 1, -1.3, 1, -1.4, 1];

describe('minimize', () => {
  it('follows a curved valley without a curvature to steer by', async () => {
    const x = Float64Array.from(valleyStart);
    const result = await minimize(rosenbrock, x, tight, unattended);
    expect(result.converged).toBe(true);
    x.forEach((value) => expect(value).toBeCloseTo(1, 5));
  });

  // RDKit 2022.09.3, MMFF94s without cut-off: the minima from 30 embedded starts each (the third one of the sulfonamide from ours).
  it.each([
    ['CC', [-4.73437]],
    ['C1CCCCC1', [-3.56093, 2.36881]],
    ['c1ccccc1', [16.22697]],
    ['CC#CC=C=C', [0.16029]],
    ['C[N+](C)(C)CC(=O)[O-]', [22.88123]],
    ['CS(=O)(=O)Nc1ccccc1', [-37.46374, -36.89825, -36.87697]],
    ['C[Si](C)(C)Cl', [-0.29669]],
  ])('brings %s to a minimum that is known, to a gradient of 1e-6', async (smiles, minima) => {
    const { energy, x, options } = await prepare(smiles);
    const result = await minimize(energy, x, options, unattended);
    expect(result.converged).toBe(true);
    expect(gradientRms(energy, x)).toBeLessThanOrEqual(1e-6);
    expect(gradientRms(energy, x)).toBe(result.gradientRms);
    expect(energy(x, new Float64Array(x.length))).toBe(result.energy);
    const nearest = Math.min(...minima.map((minimum) => Math.abs(minimum - result.energy)));
    expect(nearest).toBeLessThan(2e-5);
  });

  it('brings strewn atoms downhill to a zero of the gradient', async () => {
    const { energy, x, options } = await prepare('CC(C)O');
    const random = createRandom(4);
    x.forEach((_, a) => (x[a] = 3 * random.uniform()));
    const result = await minimize(energy, x, { ...options, gradientRms: 1e-4 }, unattended);
    expect(result.converged).toBe(true);
    expect(gradientRms(energy, x)).toBeLessThanOrEqual(1e-4);
  });

  it('takes atoms apart that are all in one place', async () => {
    const { energy, x, options } = await prepare('CCO');
    x.fill(0);
    const result = await minimize(energy, x, { ...options, gradientRms: 1e-3 }, unattended);
    expect(x.every(Number.isFinite)).toBe(true);
    // The pile has more than 1e6 kcal/mol; any bonded structure has less than 1e3.
    expect(result.energy).toBeLessThan(1e3);
  });

  it('says so when it stops unconverged, with the lowest point in x', async () => {
    const { energy, x, options } = await prepare('CCCCCC(=O)NCc1ccccc1');
    const start = energy(x, new Float64Array(x.length));
    const result = await minimize(energy, x, { ...options, maxEvaluations: 10 }, unattended);
    expect(result.converged).toBe(false);
    expect(result.evaluations).toBeLessThan(40);
    expect(result.energy).toBeLessThan(start);
    expect(energy(x, new Float64Array(x.length))).toBe(result.energy);
    expect(gradientRms(energy, x)).toBe(result.gradientRms);
  });

  it('gives the same bits again, whatever ran in between', async () => {
    const run = async (smiles: string): Promise<Float64Array> => {
      const { energy, x, options } = await prepare(smiles);
      await minimize(energy, x, options, unattended);
      return x;
    };
    const first = await run('OCC(=O)Nc1ccccn1');
    await run('CC(C)Cc1ccccc1');
    expect(await run('OCC(=O)Nc1ccccn1')).toEqual(first);
  });

  it('pauses when a pause is due and ends with the reason of a cancel', async () => {
    const { energy, x, options } = await prepare('CCCCCC');
    const cancel = new AbortController();
    let time = 0;
    let breaths = 0;
    const control = createControl({
      now: () => (time += 15),
      breathe: () => {
        breaths++;
        if (breaths === 3) cancel.abort(new Error('enough'));
        return Promise.resolve();
      },
      signal: cancel.signal,
    });
    await expect(minimize(energy, x, options, control)).rejects.toThrow('enough');
    expect(breaths).toBe(3);
  });
});
