/** Tells minima from saddles: second derivatives from differences of the analytic gradient. */
import type { Control } from '../control';
import type { CurvatureTerm, EnergyTerm } from '../energy-term';
import { createRandom } from '../random';
import { diagonalize } from './eigen';
import { dot } from './history';
import { createPreconditioner } from './preconditioner';
import { orthonormalize, rigidMotions } from './rigid-motions';

/** Displacement of the longest-moving coordinate for a difference of gradients, Å. */
const DIFFERENCE_STEP = 1e-3;

/** A direction of the coordinates with the energy's second derivative along it. */
export interface Mode {
  /** kcal/mol/Å² */
  readonly curvature: number;
  /** 3N, of length 1 */
  readonly direction: Float64Array;
}

/** The matrix of second derivatives (3N × 3N, row by row, kcal/mol/Å²) by central differences of the gradient. */
export function differenceHessian(energy: EnergyTerm, x: Readonly<Float64Array>): Float64Array {
  const size = x.length;
  const multiply = hessianProduct(energy, x);
  const unit = new Float64Array(size);
  const row = new Float64Array(size);
  const hessian = new Float64Array(size * size);
  for (let a = 0; a < size; a++) {
    unit.fill(0);
    unit[a] = 1;
    multiply(unit, row);
    for (let b = 0; b < size; b++) {
      hessian[a * size + b] += 0.5 * row[b];
      hessian[b * size + a] += 0.5 * row[b];
    }
  }
  return hessian;
}

/** The function that writes Hessian(x) · vector into `product`, by a central difference along the vector. */
function hessianProduct(
  energy: EnergyTerm,
  x: Readonly<Float64Array>,
): (vector: Float64Array, product: Float64Array) => void {
  const moved = new Float64Array(x.length);
  const behind = new Float64Array(x.length);
  return (vector, product) => {
    let largest = 0;
    for (let a = 0; a < vector.length; a++) largest = Math.max(largest, Math.abs(vector[a]));
    const step = DIFFERENCE_STEP / largest;
    for (let a = 0; a < x.length; a++) moved[a] = x[a] + step * vector[a];
    product.fill(0);
    energy(moved, product);
    for (let a = 0; a < x.length; a++) moved[a] = x[a] - step * vector[a];
    behind.fill(0);
    energy(moved, behind);
    for (let a = 0; a < x.length; a++) product[a] = (product[a] - behind[a]) / (2 * step);
  };
}

/** Directions the search for the lowest mode may span. */
const LARGEST_SUBSPACE = 60;
/** Error of the lowest curvature that is small enough, kcal/mol/Å². */
const CURVATURE_ERROR = 1e-3;

/**
 * The softest internal mode at a stationary point of an energy that does not feel rigid motions, by Davidson's method
 * (J. Comput. Phys. 1975, 17, 87) on gradient differences. Deterministic. Its curvature is an upper bound of
 * the lowest one; below zero it proves a saddle. Null for a molecule without internal freedom.
 */
export async function softestMode(
  energy: EnergyTerm,
  x: Readonly<Float64Array>,
  curvature: CurvatureTerm,
  control: Control,
): Promise<Mode | null> {
  const size = x.length;
  const rigid = rigidMotions(x);
  const freedom = size - rigid.length;
  if (freedom <= 0) return null;
  const multiply = hessianProduct(energy, x);
  const preconditioner = createPreconditioner(curvature, size);
  preconditioner.refresh(Float64Array.from(x));
  const basis: Float64Array[] = [];
  const products: Float64Array[] = [];
  let guess = startVector(size);
  preconditioner.solve(guess);
  let mode: Mode | null = null;

  while (basis.length < Math.min(LARGEST_SUBSPACE, freedom)) {
    if (control.due()) await control.pause();
    if (!orthonormalize(guess, [...rigid, ...basis])) break;
    const product = new Float64Array(size);
    multiply(guess, product);
    basis.push(guess);
    products.push(product);
    const { residual, ...found } = lowestInSubspace(basis, products, rigid);
    mode = found;
    if (Math.sqrt(dot(residual, residual)) <= CURVATURE_ERROR) break;
    preconditioner.solve(residual);
    guess = residual;
  }
  return mode;
}

/** A direction without symmetry, so that it has a share of every mode. */
function startVector(size: number): Float64Array {
  const random = createRandom(1);
  return Float64Array.from({ length: size }, () => random.uniform() - 0.5);
}

/** The lowest Ritz pair in the span of `basis`, and what is left of (Hessian - curvature) · direction. */
function lowestInSubspace(
  basis: readonly Float64Array[],
  products: readonly Float64Array[],
  rigid: readonly Float64Array[],
): Mode & { readonly residual: Float64Array } {
  const count = basis.length;
  const projected = new Float64Array(count * count);
  for (let a = 0; a < count; a++) {
    for (let b = 0; b < count; b++) {
      projected[a * count + b] = 0.5 * (dot(basis[a], products[b]) + dot(basis[b], products[a]));
    }
  }
  const { values, vectors } = diagonalize(projected, count);
  const curvature = values[0];
  const direction = combine(basis, vectors[0]);
  const residual = combine(products, vectors[0]);
  for (let a = 0; a < residual.length; a++) residual[a] -= curvature * direction[a];
  for (const motion of rigid) {
    const part = dot(residual, motion);
    for (let a = 0; a < residual.length; a++) residual[a] -= part * motion[a];
  }
  return { curvature, direction, residual };
}

function combine(vectors: readonly Float64Array[], weights: Float64Array): Float64Array {
  const sum = new Float64Array(vectors[0].length);
  for (let n = 0; n < vectors.length; n++) {
    for (let a = 0; a < sum.length; a++) sum[a] += weights[n] * vectors[n][a];
  }
  return sum;
}
