/** The WebAssembly energy against the plain terms. */
import { describe, expect, it } from 'vitest';
import type { EnergyTerm } from '$lib/engine/energy-term';
import { createRandom } from '$lib/engine/random';
import { gradientError, gradientOf } from '../../../../../tests/support/gradient';
import type { Dielectric } from '../forcefield';
import type { Interactions } from '../interactions';
import { angleTerm } from '../terms/angle';
import { bondTerm } from '../terms/bond';
import { electrostaticTerm } from '../terms/electrostatic';
import { outOfPlaneTerm } from '../terms/out-of-plane';
import { stretchBendTerm } from '../terms/stretch-bend';
import { torsionTerm } from '../terms/torsion';
import { vanDerWaalsTerm } from '../terms/van-der-waals';
import { compiledEnergy } from './energy';

const vacuum: Dielectric = { constant: 1, distanceDependent: false };
const dielectrics: Dielectric[] = [vacuum, { constant: 4, distanceDependent: true }];

/** The plain version: the sum of all terms. */
function plainEnergy(interactions: Interactions, dielectric: Dielectric): EnergyTerm {
  const terms = [
    bondTerm(interactions.bonds),
    angleTerm(interactions.angles),
    stretchBendTerm(interactions.stretchBends),
    outOfPlaneTerm(interactions.outOfPlanes),
    torsionTerm(interactions.torsions),
    vanDerWaalsTerm(interactions.vanDerWaals),
    electrostaticTerm(interactions.electrostatics, dielectric),
  ];
  return (x, gradient) => terms.reduce((sum, term) => sum + term(x, gradient), 0);
}

/** `count` different sequences of `size` different atoms. */
function sequences(atoms: number, size: number, count: number): Int32Array {
  const chosen: number[] = [];
  for (let n = 0; n < count; n++) {
    const stride = 1 + Math.floor(n / atoms);
    for (let a = 0; a < size; a++) chosen.push((n + a * stride) % atoms);
  }
  return Int32Array.from(chosen);
}

/** Made-up interactions: counts odd and even, a third of the pairs excluded, some atoms without charge. */
function madeUp(atoms: number, bonded: number, seed: number) {
  const random = createRandom(seed);
  const values = (count: number, low: number, high: number): Float64Array =>
    Float64Array.from({ length: count }, () => low + (high - low) * random.uniform());
  const vertices = sequences(atoms, 3, bonded);
  const bends = values(bonded, 90, 130);
  const coupled = Array.from({ length: bonded }, (_, n) => n).filter((n) => n % 2 === 0);
  const pairs: number[] = [];
  const charged: number[] = [];
  for (let i = 0; i < atoms; i++) {
    for (let j = i + 1; j < atoms; j++) {
      if ((i + j) % 3 === 0) continue;
      pairs.push(i, j);
      if (i % 4 !== 0) charged.push(i, j);
    }
  }
  const interactions: Interactions = {
    bonds: {
      atoms: sequences(atoms, 2, bonded),
      length: values(bonded, 1, 1.6),
      force: values(bonded, 3, 8),
    },
    angles: {
      atoms: vertices,
      angle: bends,
      force: values(bonded, 0.3, 1),
      linear: new Uint8Array(bonded),
    },
    stretchBends: {
      atoms: Int32Array.from(coupled.flatMap((n) => [...vertices.subarray(3 * n, 3 * n + 3)])),
      angle: Float64Array.from(coupled, (n) => bends[n]),
      lengthIJ: values(coupled.length, 1, 1.6),
      lengthKJ: values(coupled.length, 1, 1.6),
      forceIJK: values(coupled.length, -0.2, 0.4),
      forceKJI: values(coupled.length, -0.2, 0.4),
    },
    outOfPlanes: { atoms: sequences(atoms, 4, bonded), force: values(bonded, -0.05, 0.2) },
    torsions: {
      atoms: sequences(atoms, 4, bonded),
      v1: values(bonded, -1, 1),
      v2: values(bonded, -3, 3),
      v3: values(bonded, -1, 1),
    },
    vanDerWaals: {
      atoms: Int32Array.from(pairs),
      radius: values(pairs.length / 2, 2, 4),
      depth: values(pairs.length / 2, 0, 0.1),
    },
    electrostatics: {
      atoms: Int32Array.from(charged),
      chargeProduct: values(charged.length / 2, -0.2, 0.2),
    },
  };
  return { interactions, x: values(3 * atoms, 0, 3 * Math.cbrt(atoms)) };
}

describe.each(dielectrics)('the compiled energy, dielectric %o', (dielectric) => {
  // 200 atoms are more than the first memory page holds.
  it.each([
    [2, 0],
    [3, 0],
    [4, 1],
    [7, 6],
    [30, 31],
    [31, 30],
    [200, 150],
  ])('equals the plain terms for %d atoms and %d interactions of a kind', (atoms, bonded) => {
    const { interactions, x } = madeUp(atoms, bonded, atoms);
    const fast = compiledEnergy(atoms, interactions, dielectric);
    const expected = new Float64Array(x.length);
    const energy = plainEnergy(interactions, dielectric)(x, expected);
    const gradient = new Float64Array(x.length);
    const scale = Math.max(1, ...expected.map(Math.abs));
    expect(Math.abs(fast(x, gradient) - energy)).toBeLessThan(1e-11 * scale);
    const errors = gradient.map((value, a) => Math.abs(value - expected[a]));
    expect(Math.max(...errors)).toBeLessThan(1e-11 * scale);
  });

  it('gives the same bits whatever other molecule was computed in between', () => {
    const first = madeUp(20, 11, 1);
    const second = madeUp(33, 12, 2);
    const energyOfFirst = compiledEnergy(20, first.interactions, dielectric);
    const energyOfSecond = compiledEnergy(33, second.interactions, dielectric);
    const before = gradientOf(energyOfFirst, first.x);
    gradientOf(energyOfSecond, second.x);
    expect(gradientOf(energyOfFirst, first.x)).toEqual(before);
  });

  it('stays finite for atoms on top of each other', () => {
    const { interactions } = madeUp(9, 9, 3);
    const gradient = new Float64Array(27);
    const energy = compiledEnergy(9, interactions, dielectric)(new Float64Array(27), gradient);
    expect([energy, ...gradient].every(Number.isFinite)).toBe(true);
  });

  it('is zero for a single atom', () => {
    const { interactions } = madeUp(1, 0, 1);
    expect(
      compiledEnergy(1, interactions, dielectric)(new Float64Array(3), new Float64Array(3)),
    ).toBe(0);
  });
});

describe('one interaction alone', () => {
  const four = Int32Array.of(0, 1, 2, 3);
  const one = (value: number): Float64Array => Float64Array.of(value);
  const { interactions: none } = madeUp(1, 0, 1);
  const kinds: Record<string, Partial<Interactions>> = {
    bond: { bonds: { atoms: four.slice(0, 2), length: one(1.5), force: one(4) } },
    angle: {
      angles: {
        atoms: four.slice(0, 3),
        angle: one(110),
        force: one(0.8),
        linear: Uint8Array.of(0),
      },
    },
    'angle with stretch-bend': {
      angles: {
        atoms: four.slice(0, 3),
        angle: one(110),
        force: one(0.8),
        linear: Uint8Array.of(0),
      },
      stretchBends: {
        atoms: four.slice(0, 3),
        angle: one(110),
        lengthIJ: one(1.4),
        lengthKJ: one(1.1),
        forceIJK: one(0.2),
        forceKJI: one(0.1),
      },
    },
    'out-of-plane angle': { outOfPlanes: { atoms: four, force: one(0.1) } },
    torsion: { torsions: { atoms: four, v1: one(0.5), v2: one(2), v3: one(-0.3) } },
  };
  const geometries: Record<string, number[]> = {
    'a bent chain': [-0.5, 1.4, 0, 0, 0, 0, 1.5, 0, 0, 2.1, 0.9, 1],
    'a planar center': [1.4, 0, 0, 0, 0, 0, -0.7, 1.2, 0, -0.6, -1.1, 0],
    'a steep pyramid': [1.4, 0, 3, 0, 0, 0, -0.7, 1.2, 3, -0.6, -1.1, 3],
    'an angle of 179.9 degrees': [1.4, 0, 0, 0, 0, 0, -1.4, 0.00244, 0, -2, 1, 0.3],
    'an angle of 1 degree': [1.4, 0, 0, 0, 0, 0, 1.5, 0.0262, 0, 2, 1, 0.3],
  };
  const cases = Object.entries(kinds).flatMap(([kind, tables]) =>
    Object.entries(geometries).map(([place, x]) => ({ kind, place, tables, x })),
  );

  it.each(cases)('a $kind has the gradient of its energy at $place', ({ tables, x }) => {
    const term = compiledEnergy(4, { ...none, ...tables }, vacuum);
    expect(gradientError(term, Float64Array.from(x), 1e-6)).toBeLessThan(1e-5);
  });

  it.each(cases)('a $kind has the plain energy at $place', ({ tables, x }) => {
    const all = { ...none, ...tables };
    const at = Float64Array.from(x);
    const unused = new Float64Array(12);
    const expected = plainEnergy(all, vacuum)(at, unused);
    expect(compiledEnergy(4, all, vacuum)(at, unused)).toBeCloseTo(expected, 10);
  });
});

it('refuses a stretch-bend without its angle', () => {
  const { interactions } = madeUp(9, 9, 3);
  const { angles } = interactions;
  const orphaned = {
    ...interactions,
    angles: { ...angles, angle: angles.angle.map((a) => a + 1) },
  };
  expect(() => compiledEnergy(9, orphaned, vacuum)).toThrow('stretch-bend');
});
