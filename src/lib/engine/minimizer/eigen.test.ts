import { expect, it } from 'vitest';
import { createRandom } from '$lib/engine/random';
import { diagonalize } from './eigen';

it('finds the modes of a chain of springs', () => {
  // Fixed ends: eigenvalues 2 - 2 cos(kπ/(n + 1)) (any textbook of vibrations).
  const size = 7;
  const matrix = Float64Array.from({ length: size * size }, (_, n) => {
    const distance = Math.abs(Math.floor(n / size) - (n % size));
    return distance === 0 ? 2 : distance === 1 ? -1 : 0;
  });
  const { values } = diagonalize(matrix, size);
  values.forEach((value, k) => {
    expect(value).toBeCloseTo(2 - 2 * Math.cos(((k + 1) * Math.PI) / (size + 1)), 12);
  });
});

it('gives orthonormal vectors that the matrix only stretches', () => {
  const size = 9;
  const random = createRandom(2);
  const matrix = new Float64Array(size * size);
  for (let r = 0; r < size; r++) {
    for (let c = 0; c <= r; c++) {
      matrix[r * size + c] = matrix[c * size + r] = random.normal();
    }
  }
  const { values, vectors } = diagonalize(matrix, size);
  for (let n = 0; n < size; n++) {
    for (let m = 0; m <= n; m++) {
      const product = vectors[n].reduce((sum, value, k) => sum + value * vectors[m][k], 0);
      expect(product).toBeCloseTo(n === m ? 1 : 0, 12);
    }
    for (let r = 0; r < size; r++) {
      let image = 0;
      for (let c = 0; c < size; c++) image += matrix[r * size + c] * vectors[n][c];
      expect(image).toBeCloseTo(values[n] * vectors[n][r], 11);
    }
  }
});
