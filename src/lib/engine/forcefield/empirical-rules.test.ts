import { describe, expect, it } from 'vitest';
import { estimateAngle } from './angle-parameters';
import { estimateBond } from './bond-parameters';
import { periodicRow } from './element-rows';
import { angleClass, stretchBendClass } from './interaction-classes';
import { tableKey } from './parameter-table';
import { parametersOf } from './parameters';
import { estimateTorsion } from './torsion-rules';
import { combineVanDerWaals } from './van-der-waals-parameters';

const parameters = parametersOf('MMFF94');
const properties = (type: number) => parameters.properties.get(type)!;

// Halgren, J. Comput. Chem. 1996, 17, 616.
describe('empirical rules', () => {
  it('estimates a bond length from radii and electronegativities', () => {
    // 0.77 + 0.77, nothing off; 0.73 + 0.74 − 0.085 · (4.12 − 3.07)^1.4
    expect(estimateBond(parameters, 6, 6)!.length).toBeCloseTo(1.54, 12);
    expect(estimateBond(parameters, 7, 9)!.length).toBeCloseTo(1.47 - 0.085 * 1.05 ** 1.4, 12);
  });

  it('scales a reference force constant by the sixth power of the lengths', () => {
    expect(estimateBond(parameters, 6, 6)!.force).toBeCloseTo(3.8 * (1.512 / 1.54) ** 6, 10);
  });

  it('takes the rule of Herschbach and Laurie where no reference bond exists', () => {
    const { length, force } = estimateBond(parameters, 6, 29)!;
    // Rows 1 and 30 (first transition series): a = 2.08, d = 1.14.
    expect(force).toBeCloseTo(10 ** (-(length - 2.08) / 1.14), 10);
  });

  it('knows no bond to an element without radius', () => {
    expect(estimateBond(parameters, 6, 5)).toBeUndefined();
  });

  it('gives the reference angles of the rule', () => {
    expect(estimateAngle(properties(1), 3)).toBe(60);
    expect(estimateAngle(properties(1), 4)).toBe(90);
    expect(estimateAngle(properties(1), 0)).toBe(109.45);
    expect(estimateAngle(properties(6), 0)).toBe(105);
    expect(estimateAngle(properties(15), 0)).toBe(95);
    expect(estimateAngle(properties(4), 0)).toBe(180);
    expect(estimateAngle(properties(8), 0)).toBe(107);
    expect(estimateAngle(properties(26), 0)).toBe(92);
    expect(estimateAngle(properties(2), 0)).toBe(120);
  });

  it.each([
    ['a, linear', 4, 1, 'single', [0, 0, 0]],
    ['b, aromatic', 37, 37, 'aromatic', [0, 6, 0]],
    ['c, double', 2, 2, 'double', [0, 12, 0]],
    ['d, both tetrahedral', 1, 1, 'single', [0, 0, 2.12 / 9]],
    ['e, tetrahedral and trigonal', 1, 2, 'single', [0, 0, 0]],
    ['f, divalent and tetrahedral', 15, 1, 'single', [0, 0, Math.sqrt(2.12 * 0.49) / 3]],
    ['g, conjugated carbons', 2, 2, 'single', [0, 1.8, 0]],
    ['g, two lone pairs', 39, 10, 'single', [0, 0, 0]],
    ['g, amide', 10, 3, 'single', [0, 6, 0]],
    ['h, disulfide', 15, 15, 'single', [0, -8, 0]],
    ['h, peroxide', 6, 6, 'single', [0, -2, 0]],
  ] as const)('estimates torsions by rule %s', (_name, j, k, kind, expected) => {
    const found = estimateTorsion({ j: properties(j), k: properties(k), kind })!;
    expected.forEach((value, n) => expect(found[n]).toBeCloseTo(value, 12));
  });

  it('meets the rows that the published table took from the rules', () => {
    // Fully wild rows 5-15-15, 2-2 of class 1 and 10-3 of class 5 (J. Comput. Chem. 1996, 17, 616).
    const row = (torsionClass: number, j: number, k: number): readonly number[] =>
      parameters.torsions.get(tableKey(torsionClass, 0, j, k, 0))!;
    expect(row(5, 15, 15)).toEqual([0, -8, 0]);
    expect(row(1, 2, 2)).toEqual([0, 1.8, 0]);
    expect(row(5, 3, 10)).toEqual([0, 6, 0]);
  });
});

describe('classes', () => {
  // J. Comput. Chem. 1996, 17, 553, table of angle and stretch-bend types.
  it('tells angles by ring and by delocalized single bonds', () => {
    expect([0, 1, 2].map((n) => angleClass(0, Math.min(n, 1), Math.max(n - 1, 0)))).toEqual([
      0, 1, 2,
    ]);
    expect([angleClass(3, 0, 0), angleClass(3, 1, 0), angleClass(3, 1, 1)]).toEqual([3, 5, 6]);
    expect([angleClass(4, 0, 0), angleClass(4, 1, 0), angleClass(4, 1, 1)]).toEqual([4, 7, 8]);
  });

  it('tells stretch-bends by angle and by which bond is delocalized', () => {
    expect([1, 0].map((first) => stretchBendClass(1, first))).toEqual([1, 2]);
    expect([1, 0].map((first) => stretchBendClass(5, first))).toEqual([6, 7]);
    expect([1, 0].map((first) => stretchBendClass(7, first))).toEqual([9, 10]);
    expect([0, 2, 3, 4, 6, 8].map((angle) => stretchBendClass(angle, 1))).toEqual([
      0, 3, 5, 4, 8, 11,
    ]);
  });

  it('counts rows of the periodic table from hydrogen', () => {
    expect([1, 6, 17, 35, 53].map(periodicRow)).toEqual([0, 1, 2, 3, 4]);
    expect([26, 30, 47].map(periodicRow)).toEqual([30, 30, 40]);
  });
});

// RDKit 2022.09.3, MMFFMolProperties.GetMMFFVdWParams.
describe('van der Waals pairs', () => {
  const pair = (i: number, j: number) =>
    combineVanDerWaals(parameters.vanDerWaals.get(i)!, parameters.vanDerWaals.get(j)!);

  it('combines like and unlike types', () => {
    expect(pair(1, 1).radius).toBeCloseTo(3.9377389919289634, 10);
    expect(pair(1, 1).depth).toBeCloseTo(0.06779699304291371, 10);
    expect(pair(6, 6).radius).toBeCloseTo(3.5581488427996217, 10);
    expect(pair(6, 6).depth).toBeCloseTo(0.07625459795691673, 10);
  });

  it('shrinks and weakens hydrogen bonds', () => {
    expect(pair(21, 8).radius).toBeCloseTo(2.6568477686322076, 10);
    expect(pair(8, 21).depth).toBeCloseTo(0.016843816258122306, 10);
  });
});
