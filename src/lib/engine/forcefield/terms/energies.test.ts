/** Energies of single interactions against values worked out from the published equations by hand. */
import { describe, expect, it } from 'vitest';
import { angleTerm } from './angle';
import { bondTerm } from './bond';
import { electrostaticTerm } from './electrostatic';
import { outOfPlaneTerm } from './out-of-plane';
import { stretchBendTerm } from './stretch-bend';
import { torsionTerm } from './torsion';
import { vanDerWaalsTerm } from './van-der-waals';

const one = (value: number): Float64Array => Float64Array.of(value);
const pair = Int32Array.of(0, 1);
const three = Int32Array.of(0, 1, 2);
const four = Int32Array.of(0, 1, 2, 3);
/** i on x, j at the origin, k on y, l on z: two right angles, a torsion of 90 degrees about j-k. */
const corner = Float64Array.of(1, 0, 0, 0, 0, 0, 0, 1, 0, 0, 1, 1);
const unused = new Float64Array(12);

// Halgren, J. Comput. Chem. 1996, 17, 490, equations 2 to 8 and 13.
describe('the published equations', () => {
  it('stretch a bond', () => {
    const term = bondTerm({ atoms: pair, length: one(0.9), force: one(5) });
    const series = 1 - 2 * 0.1 + (7 / 12) * 4 * 0.01;
    expect(term(corner, unused)).toBeCloseTo((143.9325 / 2) * 5 * 0.01 * series, 9);
  });

  it('bend an angle', () => {
    const table = { atoms: three, angle: one(100), force: one(0.8), linear: Uint8Array.of(0) };
    const expected = (0.043844 / 2) * 0.8 * 100 * (1 + 0.006981317 * 10);
    expect(angleTerm(table)(corner, unused)).toBeCloseTo(expected, 4);
  });

  it('bend a linear vertex', () => {
    const table = { atoms: three, angle: one(180), force: one(0.3), linear: Uint8Array.of(1) };
    expect(angleTerm(table)(corner, unused)).toBeCloseTo(143.9325 * 0.3, 9);
  });

  it('couple stretching and bending', () => {
    const term = stretchBendTerm({
      atoms: three,
      lengthIJ: one(0.9),
      lengthKJ: one(1.2),
      angle: one(100),
      forceIJK: one(0.3),
      forceKJI: one(0.1),
    });
    expect(term(corner, unused)).toBeCloseTo(2.5121 * (0.3 * 0.1 - 0.1 * 0.2) * -10, 4);
  });

  it('bend out of a plane', () => {
    // l straight above the plane i-j-k: a Wilson angle of 90 degrees.
    const x = Float64Array.of(1, 0, 0, 0, 0, 0, 0, 1, 0, 0, 0, 1);
    const term = outOfPlaneTerm({ atoms: four, force: one(0.05) });
    expect(term(x, unused)).toBeCloseTo((0.043844 / 2) * 0.05 * 8100, 3);
  });

  it.each([
    [0, 0.8 + 0.5],
    [60, 0.75 * 0.8 + 0.75 * -0.6],
    [90, (0.8 + 0.5) / 2 - 0.6],
    [180, 0],
  ])('turn a torsion to %d degrees', (degrees, expected) => {
    const t = (degrees * Math.PI) / 180;
    const x = Float64Array.of(0, 1, 0, 0, 0, 0, 1, 0, 0, 1, Math.cos(t), Math.sin(t));
    const term = torsionTerm({ atoms: four, v1: one(0.8), v2: one(-0.6), v3: one(0.5) });
    expect(term(x, unused)).toBeCloseTo(expected, 9);
  });

  it('give a van der Waals pair its depth at its radius and nothing far away', () => {
    const term = vanDerWaalsTerm({ atoms: pair, radius: one(3.5), depth: one(0.07) });
    expect(term(Float64Array.of(0, 0, 0, 3.5, 0, 0), unused)).toBeCloseTo(-0.07, 12);
    expect(term(Float64Array.of(0, 0, 0, 200, 0, 0), unused)).toBeCloseTo(0, 9);
  });

  it('screen charges', () => {
    const table = { atoms: pair, chargeProduct: one(0.5) };
    const vacuum = electrostaticTerm(table, { constant: 1, distanceDependent: false });
    expect(vacuum(corner, unused)).toBeCloseTo((332.0716 * 0.5) / 1.05, 9);
    const screened = electrostaticTerm(table, { constant: 4, distanceDependent: true });
    expect(screened(corner, unused)).toBeCloseTo((332.0716 * 0.5) / (4 * 1.05 ** 2), 9);
  });
});
