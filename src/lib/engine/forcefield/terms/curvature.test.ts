/** Curvatures steer the minimizer: symmetric, positive semidefinite, and right where Gauss and Newton are right. */
import { describe, expect, it } from 'vitest';
import type { CurvatureTerm, EnergyTerm } from '$lib/engine/energy-term';
import { diagonalize } from '$lib/engine/minimizer/eigen';
import { unattended } from '$lib/engine/control';
import { differenceHessian } from '$lib/engine/minimizer/hessian';
import { createRandom } from '$lib/engine/random';
import { angleCurvature, angleTerm } from './angle';
import { bondCurvature, bondTerm } from './bond';
import { outOfPlaneCurvature, outOfPlaneTerm } from './out-of-plane';
import { torsionCurvature, torsionTerm } from './torsion';

const one = (value: number): Float64Array => Float64Array.of(value);
const four = Int32Array.of(0, 1, 2, 3);
const bonds = { atoms: Int32Array.of(0, 1), length: one(1.5), force: one(4.3) };
const angles = {
  atoms: Int32Array.of(0, 1, 2),
  angle: one(90),
  force: one(0.8),
  linear: Uint8Array.of(0),
};
const linearAngles = { ...angles, angle: one(180), linear: Uint8Array.of(1) };
const planes = { atoms: four, force: one(0.1) };
const torsions = { atoms: four, v1: one(0), v2: one(0), v3: one(0.4) };

interface Case {
  readonly energy: EnergyTerm;
  readonly curvature: CurvatureTerm;
  /** A geometry without strain, where the approximation is exact. */
  readonly relaxed: Float64Array;
}

const cases: Record<string, Case> = {
  bond: {
    energy: bondTerm(bonds),
    curvature: bondCurvature(bonds),
    relaxed: Float64Array.of(0, 0, 0, 0, 0.9, 1.2, 3, 0, 0, 0, 3, 0),
  },
  angle: {
    energy: angleTerm(angles),
    curvature: angleCurvature(angles),
    relaxed: Float64Array.of(1.4, 0, 0, 0, 0, 0, 0, 1.1, 0, 3, 3, 3),
  },
  'out-of-plane': {
    energy: outOfPlaneTerm(planes),
    curvature: outOfPlaneCurvature(planes),
    relaxed: Float64Array.of(1.4, 0, 0, 0, 0, 0, -0.7, 1.2, 0, -0.6, -1.1, 0),
  },
  torsion: {
    energy: torsionTerm(torsions),
    curvature: torsionCurvature(torsions),
    // Trans: the threefold term has its minimum there.
    relaxed: Float64Array.of(-0.5, 1.4, 0, 0, 0, 0, 1.5, 0, 0, 2.1, -1.3, 0),
  },
};

function curvatureOf(term: CurvatureTerm, x: Float64Array): Float64Array {
  const hessian = new Float64Array(x.length ** 2);
  term(x, hessian);
  return hessian;
}

function largestDifference(a: Float64Array, b: Float64Array): number {
  return Math.max(...a.map((value, n) => Math.abs(value - b[n])));
}

describe.each(Object.entries(cases))('the curvature of the %s term', (_name, test) => {
  it('is the exact second derivative where nothing is strained', async () => {
    const exact = await differenceHessian(test.energy, test.relaxed, unattended);
    const tolerance = 1e-4 * Math.max(...exact);
    expect(largestDifference(curvatureOf(test.curvature, test.relaxed), exact)).toBeLessThan(
      tolerance,
    );
  });

  it('is symmetric and positive semidefinite anywhere', () => {
    const random = createRandom(5);
    for (let n = 0; n < 10; n++) {
      const x = Float64Array.from({ length: 12 }, () => 3 * random.uniform());
      const hessian = curvatureOf(test.curvature, x);
      const transposed = hessian.map((_, k) => hessian[(k % 12) * 12 + Math.floor(k / 12)]);
      const scale = Math.max(1, ...hessian);
      expect(largestDifference(hessian, transposed)).toBeLessThan(1e-12 * scale);
      expect(diagonalize(hessian, 12).values[0]).toBeGreaterThan(-1e-9 * scale);
    }
  });
});

describe('the curvature of linear angles', () => {
  it.each([180, 179.9])('is finite at %d degrees', (degrees) => {
    const t = (degrees * Math.PI) / 180;
    const x = Float64Array.of(1.2, 0, 0, 0, 0, 0, 1.2 * Math.cos(t), 1.2 * Math.sin(t), 0);
    const hessian = curvatureOf(angleCurvature(linearAngles), x);
    expect(hessian.every(Number.isFinite)).toBe(true);
  });
});
