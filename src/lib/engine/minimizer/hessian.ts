/** The matrix of second derivatives by central differences of the analytic gradient. */
import type { Control } from '../control';
import type { EnergyTerm } from '../energy-term';

/**
 * Displacement of a coordinate, Å. The error of a central difference is h²/6 times the third derivative of the gradient (some
 * 1e4 kcal/mol/Å⁴ in a bond) plus the gradient's rounding over h (some 1e-13 over h): both are below 1e-5 kcal/mol/Å² here.
 */
const DISPLACEMENT = 5e-5;

/** Second derivatives at `x` (3N × 3N, row by row, symmetric, kcal/mol/Å²), from two gradients a coordinate. */
export async function differenceHessian(
  energy: EnergyTerm,
  x: Readonly<Float64Array>,
  control: Control,
): Promise<Float64Array> {
  const size = x.length;
  const moved = Float64Array.from(x);
  const ahead = new Float64Array(size);
  const behind = new Float64Array(size);
  const hessian = new Float64Array(size * size);
  for (let a = 0; a < size; a++) {
    if (control.due()) await control.pause();
    moved[a] = x[a] + DISPLACEMENT;
    const up = moved[a];
    ahead.fill(0);
    energy(moved, ahead);
    moved[a] = x[a] - DISPLACEMENT;
    // The distance as the computer holds it, which is not exactly twice the displacement.
    const distance = up - moved[a];
    behind.fill(0);
    energy(moved, behind);
    moved[a] = x[a];
    for (let b = 0; b < size; b++) hessian[a * size + b] = (ahead[b] - behind[b]) / distance;
  }
  symmetrize(hessian, size);
  return hessian;
}

function symmetrize(matrix: Float64Array, size: number): void {
  for (let a = 0; a < size; a++) {
    for (let b = 0; b < a; b++) {
      const mean = 0.5 * (matrix[a * size + b] + matrix[b * size + a]);
      matrix[a * size + b] = mean;
      matrix[b * size + a] = mean;
    }
  }
}
