import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { diagonalize } from '../minimizer/eigen';
import { createRandom } from '../random';
import { eigenvaluesOf, eigenvectorsOf, solveWith, tridiagonalize } from './tridiagonal-form';

function randomSymmetric(size: number, seed: number): Float64Array {
  const random = createRandom(seed);
  const matrix = new Float64Array(size * size);
  for (let r = 0; r < size; r++) {
    for (let c = 0; c <= r; c++)
      matrix[r * size + c] = matrix[c * size + r] = random.uniform() - 0.5;
  }
  return matrix;
}

function times(matrix: Float64Array, vector: Float64Array): Float64Array {
  return vector.map((_, r) =>
    vector.reduce((sum, value, c) => sum + matrix[r * vector.length + c] * value, 0),
  );
}

describe('the tridiagonal form of a symmetric matrix', () => {
  it.each([1, 2, 3, 10, 41])('has the eigenvalues of a matrix of size %d', async (size) => {
    const matrix = randomSymmetric(size, size);
    const { values } = diagonalize(matrix, size);
    const found = eigenvaluesOf(await tridiagonalize(matrix.slice(), size, unattended));
    found.forEach((value, n) => expect(value).toBeCloseTo(values[n], 11));
  });

  it('keeps equal eigenvalues, and a matrix that falls apart', async () => {
    const diagonal = [3, 3, 3, -1, 0, 0, 7];
    const matrix = new Float64Array(49);
    diagonal.forEach((value, n) => (matrix[8 * n] = value));
    const form = await tridiagonalize(matrix, 7, unattended);
    expect([...eigenvaluesOf(form)]).toEqual([-1, 0, 0, 3, 3, 3, 7]);
  });

  it('solves, whatever the signs of the eigenvalues', async () => {
    const matrix = randomSymmetric(30, 5);
    const right = Float64Array.from({ length: 30 }, (_, n) => Math.cos(n));
    const solution = solveWith(await tridiagonalize(matrix.slice(), 30, unattended), right);
    times(matrix, solution).forEach((value, n) => expect(value).toBeCloseTo(right[n], 9));
  });

  it('gives orthonormal vectors that the matrix only stretches', async () => {
    const matrix = randomSymmetric(25, 9);
    const form = await tridiagonalize(matrix.slice(), 25, unattended);
    const values = eigenvaluesOf(form);
    const vectors = eigenvectorsOf(form, values);
    vectors.forEach((vector, n) => {
      times(matrix, vector).forEach((value, a) =>
        expect(value).toBeCloseTo(values[n] * vector[a], 8),
      );
      for (let m = 0; m <= n; m++) {
        const product = vector.reduce((sum, value, a) => sum + value * vectors[m][a], 0);
        expect(product).toBeCloseTo(m === n ? 1 : 0, 9);
      }
    });
  });
});
