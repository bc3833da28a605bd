/** Whether a geometry is a minimum: no direction in which the energy bends down. */
import type { EnergyTerm } from '$lib/engine/energy-term';

/** Å; central differences of an analytic gradient, whose own error is of the order of 1e-9. */
const STEP = 1e-4;

/** Second derivatives at `x` by central differences of the gradient, kcal/mol/Å², row by row. */
export function numericalHessian(energy: EnergyTerm, x: Readonly<Float64Array>): Float64Array {
  const size = x.length;
  const hessian = new Float64Array(size * size);
  const moved = Float64Array.from(x);
  const gradientAt = (coordinate: number, value: number): Float64Array => {
    moved[coordinate] = value;
    const gradient = new Float64Array(size);
    energy(moved, gradient);
    moved[coordinate] = x[coordinate];
    return gradient;
  };
  for (let a = 0; a < size; a++) {
    const ahead = gradientAt(a, x[a] + STEP);
    const behind = gradientAt(a, x[a] - STEP);
    for (let b = 0; b < size; b++) {
      const second = (ahead[b] - behind[b]) / (2 * STEP);
      hessian[a * size + b] += second / 2;
      hessian[b * size + a] += second / 2;
    }
  }
  return hessian;
}

/** True when the symmetric matrix plus `shift` times the identity has only positive eigenvalues (Cholesky). */
export function isPositiveDefinite(
  matrix: Readonly<Float64Array>,
  size: number,
  shift: number,
): boolean {
  const lower = new Float64Array(size * size);
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * size + j] + (i === j ? shift : 0);
      for (let k = 0; k < j; k++) sum -= lower[i * size + k] * lower[j * size + k];
      if (i === j) {
        if (!(sum > 0)) return false;
        lower[i * size + i] = Math.sqrt(sum);
      } else lower[i * size + j] = sum / lower[j * size + j];
    }
  }
  return true;
}
