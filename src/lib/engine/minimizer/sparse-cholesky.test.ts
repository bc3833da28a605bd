/** Factorization and solution against multiplication with the matrix. */
import { describe, expect, it } from 'vitest';
import { createRandom } from '$lib/engine/random';
import { planElimination } from './elimination';
import { createFactor, factorize, solve } from './sparse-cholesky';

/** A positive semidefinite matrix coupling the given pairs of atoms, and its pattern. */
function coupledMatrix(atoms: number, pairs: readonly (readonly [number, number])[], seed: number) {
  const random = createRandom(seed);
  const size = 3 * atoms;
  const matrix = new Float64Array(size * size);
  const coupled = new Uint8Array(atoms * atoms);
  for (const [a, b] of pairs) {
    const vector = new Float64Array(size);
    for (const atom of [a, b]) for (let p = 0; p < 3; p++) vector[3 * atom + p] = random.normal();
    for (let r = 0; r < size; r++) {
      for (let c = 0; c < size; c++) matrix[r * size + c] += vector[r] * vector[c];
    }
    coupled[a * atoms + b] = coupled[b * atoms + a] = 1;
  }
  return { matrix, coupled, size };
}

const patterns: Record<string, { atoms: number; pairs: [number, number][] }> = {
  'no coupling': { atoms: 3, pairs: [] },
  'a chain': { atoms: 12, pairs: Array.from({ length: 11 }, (_, n) => [n, n + 1]) },
  'a ring': { atoms: 9, pairs: Array.from({ length: 9 }, (_, n) => [n, (n + 1) % 9]) },
  'a star': { atoms: 8, pairs: Array.from({ length: 7 }, (_, n) => [0, n + 1]) },
  everything: {
    atoms: 6,
    pairs: Array.from({ length: 36 }, (_, n): [number, number] => [
      n % 6,
      Math.floor(n / 6),
    ]).filter(([a, b]) => a < b),
  },
};

describe.each(Object.entries(patterns))('with %s', (_name, { atoms, pairs }) => {
  it('the solution times the matrix is the right-hand side', () => {
    const { matrix, coupled, size } = coupledMatrix(atoms, pairs, 3);
    const shift = 0.5;
    const factor = createFactor(planElimination(coupled, atoms));
    factorize(factor, matrix, shift);
    const random = createRandom(8);
    const right = Float64Array.from({ length: size }, () => random.normal());
    const solution = right.slice();
    solve(factor, solution);
    const errors = right.map((value, r) => {
      let sum = shift * solution[r] - value;
      for (let c = 0; c < size; c++) sum += matrix[r * size + c] * solution[c];
      return Math.abs(sum);
    });
    expect(Math.max(...errors)).toBeLessThan(1e-11);
  });
});

describe('planElimination', () => {
  it('fills nothing in for a tree', () => {
    const { coupled } = coupledMatrix(12, patterns['a chain'].pairs, 1);
    // 12 diagonal blocks and one block for each of 11 couplings.
    expect(planElimination(coupled, 12).rows).toHaveLength(23);
  });

  it('eliminates every atom once', () => {
    const { coupled } = coupledMatrix(9, patterns['a ring'].pairs, 1);
    const order = [...planElimination(coupled, 9).order].sort((a, b) => a - b);
    expect(order).toEqual([0, 1, 2, 3, 4, 5, 6, 7, 8]);
  });
});
