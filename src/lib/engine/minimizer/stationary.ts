/** Tells minima from saddles: second derivatives from differences of the analytic gradient. */
import type { Control } from '../control';
import type { CurvatureTerm, EnergyTerm } from '../energy-term';
import { createRandom } from '../random';
import { diagonalize } from './eigen';
import type { Eigensystem } from './eigen';
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

/** Directions the search for the lowest mode spans before it gathers the best of them and starts anew. */
const LARGEST_SUBSPACE = 12;
/** Directions kept then. */
const KEPT = 4;
/** Products of the Hessian with a vector spent at most. */
const MOST_PRODUCTS = 80;
/** The residual that is small enough, kcal/mol/Å², or as a share of the curvature found. */
const RESIDUAL = 1e-3;
const RELATIVE_RESIDUAL = 0.2;

/** Directions with their products with the Hessian. */
interface Subspace {
  basis: Float64Array[];
  products: Float64Array[];
}

/**
 * The softest internal mode at a stationary point of an energy that does not feel rigid motions, by Davidson's method
 * (J. Comput. Phys. 1975, 17, 87) on gradient differences, with restarts. Deterministic. Its curvature is an upper bound
 * of the lowest one; below zero it proves a saddle. Null for a molecule without internal freedom.
 */
export async function softestMode(
  energy: EnergyTerm,
  x: Readonly<Float64Array>,
  curvature: CurvatureTerm,
  control: Control,
): Promise<Mode | null> {
  const size = x.length;
  const rigid = rigidMotions(x);
  if (size <= rigid.length) return null;
  const multiply = hessianProduct(energy, x);
  const preconditioner = createPreconditioner(size);
  preconditioner.refresh(Float64Array.from(x), curvature);
  const space: Subspace = { basis: [], products: [] };
  let mode: Mode | null = null;
  let guess = startVector(size);

  for (let products = 0; products < MOST_PRODUCTS; products++) {
    if (control.due()) await control.pause();
    preconditioner.solve(guess);
    if (!orthonormalize(guess, [...rigid, ...space.basis])) break;
    const product = new Float64Array(size);
    multiply(guess, product);
    removeParts(product, rigid);
    space.basis.push(guess);
    space.products.push(product);
    const { vectors, values } = diagonalizeIn(space);
    mode = { curvature: values[0], direction: combine(space.basis, vectors[0]) };
    const residual = combine(space.products, vectors[0]);
    for (let a = 0; a < size; a++) residual[a] -= mode.curvature * mode.direction[a];
    const error = Math.sqrt(dot(residual, residual));
    if (error <= Math.max(RESIDUAL, RELATIVE_RESIDUAL * Math.abs(mode.curvature))) break;
    if (space.basis.length === LARGEST_SUBSPACE) {
      const best = vectors.slice(0, KEPT);
      space.products = best.map((weights) => combine(space.products, weights));
      space.basis = best.map((weights) => combine(space.basis, weights));
    }
    guess = residual;
  }
  return mode;
}

/** A direction without symmetry, so that it has a share of every mode. */
function startVector(size: number): Float64Array {
  const random = createRandom(1);
  return Float64Array.from({ length: size }, () => random.uniform() - 0.5);
}

/** Eigenvalues and eigenvectors of the Hessian within the subspace. */
function diagonalizeIn({ basis, products }: Subspace): Eigensystem {
  const count = basis.length;
  const projected = new Float64Array(count * count);
  for (let a = 0; a < count; a++) {
    for (let b = 0; b <= a; b++) {
      const element = 0.5 * (dot(basis[a], products[b]) + dot(basis[b], products[a]));
      projected[a * count + b] = element;
      projected[b * count + a] = element;
    }
  }
  return diagonalize(projected, count);
}

function combine(vectors: readonly Float64Array[], weights: Float64Array): Float64Array {
  const sum = new Float64Array(vectors[0].length);
  for (let n = 0; n < vectors.length; n++) {
    for (let a = 0; a < sum.length; a++) sum[a] += weights[n] * vectors[n][a];
  }
  return sum;
}

function removeParts(vector: Float64Array, directions: readonly Float64Array[]): void {
  for (const direction of directions) {
    const part = dot(vector, direction);
    for (let a = 0; a < vector.length; a++) vector[a] -= part * direction[a];
  }
}
