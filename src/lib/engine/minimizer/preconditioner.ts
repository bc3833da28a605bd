/** An approximate inverse Hessian from a curvature: regularized and factorized by Cholesky's method. */
import type { CurvatureTerm } from '../energy-term';

export interface Preconditioner {
  /** Computes and factorizes the curvature at `x`. */
  refresh(x: Float64Array): void;
  /** Turns `vector` in place into the solution of (curvature + regularization) · solution = vector. */
  solve(vector: Float64Array): void;
}

/** Added to the diagonal, kcal/mol/Å²: about the stiffness of the softest modes a molecule has. */
const REGULARIZATION = 5;

/** Creates a preconditioner for `size` coordinates. */
export function createPreconditioner(curvature: CurvatureTerm, size: number): Preconditioner {
  const factor = new Float64Array(size * size);
  return {
    refresh: (x) => {
      factor.fill(0);
      curvature(x, factor);
      factorize(factor, size);
    },
    solve: (vector) => {
      for (let i = 0; i < size; i++) {
        const row = i * size;
        let sum = vector[i];
        for (let k = 0; k < i; k++) sum -= factor[row + k] * vector[k];
        vector[i] = sum * factor[row + i];
      }
      for (let i = size - 1; i >= 0; i--) {
        const row = i * size;
        const value = vector[i] * factor[row + i];
        vector[i] = value;
        for (let k = 0; k < i; k++) vector[k] -= factor[row + k] * value;
      }
    },
  };
}

/** Replaces the lower triangle by the Cholesky factor; the diagonal holds the inverses of the pivots. */
function factorize(matrix: Float64Array, size: number): void {
  for (let i = 0; i < size; i++) {
    const row = i * size;
    for (let j = 0; j <= i; j++) {
      const other = j * size;
      let sum = matrix[row + j];
      for (let k = 0; k < j; k++) sum -= matrix[row + k] * matrix[other + k];
      matrix[row + j] =
        j < i ? sum * matrix[other + j] : 1 / Math.sqrt(Math.max(sum, 0) + REGULARIZATION);
    }
  }
}
