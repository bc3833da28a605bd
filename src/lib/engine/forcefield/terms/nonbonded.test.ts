/** The fast nonbonded energy against the plain terms. */
import { describe, expect, it } from 'vitest';
import { createRandom } from '$lib/engine/random';
import { gradientOf } from '../../../../../tests/support/gradient';
import type { Interactions } from '../interactions';
import { electrostaticTerm } from './electrostatic';
import { nonbondedTerm } from './nonbonded';
import { vanDerWaalsTerm } from './van-der-waals';

type Tables = Pick<Interactions, 'vanDerWaals' | 'electrostatics'>;

/** A made-up molecule in which every third pair is excluded and some atoms have no charge. */
function madeUp(atoms: number, seed: number): { tables: Tables; x: Float64Array } {
  const random = createRandom(seed);
  const pairs: number[] = [];
  const radius: number[] = [];
  const depth: number[] = [];
  const charged: number[] = [];
  const chargeProduct: number[] = [];
  for (let i = 0; i < atoms; i++) {
    for (let j = i + 1; j < atoms; j++) {
      if ((i + j) % 3 === 0) continue;
      pairs.push(i, j);
      radius.push(2 + 2 * random.uniform());
      depth.push(0.1 * random.uniform());
      if (i % 4 === 0) continue;
      charged.push(i, j);
      chargeProduct.push(random.normal() / 5);
    }
  }
  return {
    tables: {
      vanDerWaals: {
        atoms: Int32Array.from(pairs),
        radius: Float64Array.from(radius),
        depth: Float64Array.from(depth),
      },
      electrostatics: {
        atoms: Int32Array.from(charged),
        chargeProduct: Float64Array.from(chargeProduct),
      },
    },
    x: Float64Array.from({ length: 3 * atoms }, () => 3 * Math.cbrt(atoms) * random.uniform()),
  };
}

const dielectrics = [
  { constant: 1, distanceDependent: false },
  { constant: 4, distanceDependent: true },
];

describe.each(dielectrics)('the fast nonbonded energy, dielectric %o', (dielectric) => {
  // 200 atoms are more than the first memory page holds.
  it.each([2, 3, 4, 7, 30, 31, 200])('equals the plain terms for %d atoms', (atoms) => {
    const { tables, x } = madeUp(atoms, atoms);
    const fast = nonbondedTerm(atoms, tables, dielectric);
    const plain = [
      vanDerWaalsTerm(tables.vanDerWaals),
      electrostaticTerm(tables.electrostatics, dielectric),
    ];
    const expected = new Float64Array(x.length);
    const energy = plain.reduce((sum, term) => sum + term(x, expected), 0);
    const gradient = new Float64Array(x.length);
    const scale = Math.max(1, ...expected.map(Math.abs));
    expect(Math.abs(fast(x, gradient) - energy)).toBeLessThan(1e-11 * scale);
    const errors = gradient.map((value, a) => Math.abs(value - expected[a]));
    expect(Math.max(...errors)).toBeLessThan(1e-11 * scale);
  });

  it('is zero for a single atom', () => {
    const { tables, x } = madeUp(1, 1);
    expect(nonbondedTerm(1, tables, dielectric)(x, new Float64Array(3))).toBe(0);
  });

  it('gives the same bits whatever other molecule was computed in between', () => {
    const first = madeUp(20, 1);
    const second = madeUp(33, 2);
    const energyOfFirst = nonbondedTerm(20, first.tables, dielectric);
    const energyOfSecond = nonbondedTerm(33, second.tables, dielectric);
    const before = gradientOf(energyOfFirst, first.x);
    gradientOf(energyOfSecond, second.x);
    expect(gradientOf(energyOfFirst, first.x)).toEqual(before);
  });

  it('stays finite for atoms on top of each other', () => {
    const { tables } = madeUp(9, 3);
    const gradient = new Float64Array(27);
    const energy = nonbondedTerm(9, tables, dielectric)(new Float64Array(27), gradient);
    expect([energy, ...gradient].every(Number.isFinite)).toBe(true);
  });
});
