/**
 * Torsions held exactly while everything else relaxes. A stiff restraint would bend the minimizer's straight steps into
 * a narrow curved valley; here each step is taken along the surface where the torsions have their targets, and what it
 * misses is put right before the energy is computed.
 */
import { torsionDerivative } from '../forcefield/terms/torsion-derivative';
import { toDegrees, turnBetween } from '../units';
import { dot } from './history';

/** A torsion i-j-k-l with the angle it is held at, degrees. */
export interface HeldTorsion {
  readonly atoms: ArrayLike<number>;
  readonly target: number;
}

export interface HeldTorsions {
  /** Takes the position `x` as the place to step from; `solve` applies the inverse curvature there. */
  linearize(x: Float64Array, solve: (vector: Float64Array) => void): void;
  /** Takes out of a direction (of steps from the linearized place) what would turn the torsions. */
  flatten(direction: Float64Array): void;
  /** Moves `x`, near the linearized place, so that the torsions have their targets; false where it cannot. */
  restore(x: Float64Array): boolean;
  /**
   * Takes out of the gradient at `x` the forces that hold the torsions, so that its product with a flattened direction is
   * the slope of the energy along the restored steps.
   */
  project(x: Float64Array, gradient: Float64Array): void;
  /** Root mean square of the gradient at `x` without any part that only turns the torsions. */
  tangentRms(x: Float64Array, gradient: Float64Array): number;
  /** The farthest a torsion is from its target, degrees. */
  deviation(x: Float64Array): number;
}

/** Turned to within this of the target, radians. */
const EXACT = 1e-10;
const CORRECTIONS = 6;
/** The largest correction of one torsion at a time, radians: beyond it the derivative is another. */
const LARGEST_CORRECTION = 0.1;

/** Prepares torsions to be held in a molecule with `size` coordinates. */
export function holdTorsions(torsions: readonly HeldTorsion[], size: number): HeldTorsions {
  const count = torsions.length;
  const offsets = torsions.map(({ atoms }) => Int32Array.from(atoms, (atom) => 3 * atom));
  const derivative = new Float64Array(12);
  // For each torsion its derivatives at the linearized place and the way that turns it most softly.
  const normals = torsions.map(() => new Float64Array(size));
  const ways = torsions.map(() => new Float64Array(size));
  const couplings = new Float64Array(count * count);
  const normalsHere = torsions.map(() => new Float64Array(size));
  const couplingsHere = new Float64Array(count * count);
  const amounts = new Float64Array(count);
  const tangent = new Float64Array(size);

  const missing = (x: Float64Array, t: number): number =>
    turnBetween(toDegrees(torsionDerivative(x, offsets[t], derivative)), torsions[t].target) /
    toDegrees(1);
  const derive = (x: Float64Array, into: readonly Float64Array[]): void => {
    for (let t = 0; t < count; t++) {
      torsionDerivative(x, offsets[t], derivative);
      for (let a = 0; a < 4; a++) {
        for (let p = 0; p < 3; p++) into[t][offsets[t][a] + p] = derivative[3 * a + p];
      }
    }
  };

  return {
    linearize: (x, solve) => {
      derive(x, normals);
      for (let t = 0; t < count; t++) {
        ways[t].set(normals[t]);
        solve(ways[t]);
      }
      multiplyAll(normals, ways, couplings);
    },
    flatten: (direction) => {
      for (let t = 0; t < count; t++) amounts[t] = dot(normals[t], direction);
      solveSmall(couplings, amounts, count);
      subtractAll(direction, amounts, ways);
    },
    restore: (x) => {
      for (let n = 0; n < CORRECTIONS; n++) {
        let largest = 0;
        for (let t = 0; t < count; t++) {
          const turn = missing(x, t);
          largest = Math.max(largest, Math.abs(turn));
          amounts[t] = -Math.max(-LARGEST_CORRECTION, Math.min(LARGEST_CORRECTION, turn));
        }
        if (largest <= EXACT) return true;
        solveSmall(couplings, amounts, count);
        subtractAll(x, amounts, ways);
      }
      return false;
    },
    // Restoring moves along the ways, so no force along them may be left: they, not the normals, weigh the gradient.
    project: (x, gradient) => {
      derive(x, normalsHere);
      multiplyAll(ways, normalsHere, couplingsHere);
      for (let t = 0; t < count; t++) amounts[t] = dot(ways[t], gradient);
      solveSmall(couplingsHere, amounts, count);
      subtractAll(gradient, amounts, normalsHere);
    },
    tangentRms: (x, gradient) => {
      derive(x, normalsHere);
      multiplyAll(normalsHere, normalsHere, couplingsHere);
      for (let t = 0; t < count; t++) amounts[t] = dot(normalsHere[t], gradient);
      solveSmall(couplingsHere, amounts, count);
      tangent.set(gradient);
      subtractAll(tangent, amounts, normalsHere);
      return Math.sqrt(dot(tangent, tangent) / size);
    },
    deviation: (x) => {
      let largest = 0;
      for (let t = 0; t < count; t++) largest = Math.max(largest, Math.abs(missing(x, t)));
      return toDegrees(largest);
    },
  };
}

/** All inner products between two lists of vectors. */
function multiplyAll(
  rows: readonly Float64Array[],
  columns: readonly Float64Array[],
  products: Float64Array,
): void {
  for (let r = 0; r < rows.length; r++) {
    for (let c = 0; c < rows.length; c++) products[r * rows.length + c] = dot(rows[r], columns[c]);
  }
}

function subtractAll(
  target: Float64Array,
  amounts: Float64Array,
  vectors: readonly Float64Array[],
): void {
  for (let t = 0; t < vectors.length; t++) {
    const vector = vectors[t];
    const amount = amounts[t];
    for (let a = 0; a < target.length; a++) target[a] -= amount * vector[a];
  }
}

/** Solves a system of one to a few equations in place by elimination; `matrix` is kept. */
function solveSmall(matrix: Float64Array, right: Float64Array, count: number): void {
  if (count === 1) {
    right[0] /= matrix[0];
    return;
  }
  const rows = matrix.slice();
  for (let p = 0; p < count; p++) {
    for (let r = p + 1; r < count; r++) {
      const factor = rows[r * count + p] / rows[p * count + p];
      for (let c = p; c < count; c++) rows[r * count + c] -= factor * rows[p * count + c];
      right[r] -= factor * right[p];
    }
  }
  for (let p = count - 1; p >= 0; p--) {
    for (let c = p + 1; c < count; c++) right[p] -= rows[p * count + c] * right[c];
    right[p] /= rows[p * count + p];
  }
}
