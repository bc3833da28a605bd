/**
 * Torsions held exactly while everything else relaxes. A stiff restraint would bend the minimizer's straight steps into
 * a narrow curved valley; here each step is taken along the surface where the torsions have their targets, and what it
 * misses is put right before the energy is computed.
 */
import { torsionDerivative } from '../forcefield/terms/torsion-derivative';
import { toDegrees, turnBetween } from '../units';
import { dot } from './history';
import type { LocalFrames } from './local-frames';

/** A torsion i-j-k-l with the angle it is held at, degrees. */
export interface HeldTorsion {
  readonly atoms: ArrayLike<number>;
  readonly target: number;
}

export interface HeldTorsions {
  /** Takes over the targets of `torsions`; false, and unchanged, where they are not the torsions it was made for. */
  retarget(torsions: readonly HeldTorsion[]): boolean;
  /** Learns the ways along which the torsions turn most softly; `solve` applies the inverse curvature, in local form. */
  soften(x: Float64Array, frames: LocalFrames, solve: (vector: Float64Array) => void): void;
  /** Takes the position `x` with its frames as the place to step from. */
  linearize(x: Float64Array, frames: LocalFrames): void;
  /** Takes out of a direction (of steps from the linearized place) what would turn the torsions. */
  flatten(direction: Float64Array): void;
  /** Moves `x`, near the linearized place, so that the torsions have their targets; false where it cannot. */
  restore(x: Float64Array): boolean;
  /**
   * Takes out of the gradient at the place restored last the forces that hold the torsions, so that its product with a
   * flattened direction is the slope of the energy along the restored steps. Returns the root mean square of the gradient
   * without any part that only turns the torsions.
   */
  project(gradient: Float64Array): number;
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
  // For each torsion its twelve derivatives at the linearized place and at another one.
  const normals = torsions.map(() => new Float64Array(12));
  const normalsHere = torsions.map(() => new Float64Array(12));
  // The ways that turn them most softly, in local form and from the linearized place.
  const localWays = torsions.map(() => new Float64Array(size));
  const ways = torsions.map(() => new Float64Array(size));
  const couplings = new Float64Array(count * count);
  const amounts = new Float64Array(count);
  const tangent = new Float64Array(size);
  const targets = Float64Array.from(torsions, ({ target }) => target);

  const missing = (x: Float64Array, t: number): number =>
    turnBetween(toDegrees(torsionDerivative(x, offsets[t], normalsHere[t])), targets[t]) /
    toDegrees(1);
  const derive = (x: Float64Array, into: readonly Float64Array[]): void => {
    for (let t = 0; t < count; t++) torsionDerivative(x, offsets[t], into[t]);
  };
  /** All products between the derivatives of torsions and some vectors. */
  const couple = (derivatives: readonly Float64Array[], vectors: readonly Float64Array[]): void => {
    for (let r = 0; r < count; r++) {
      for (let c = 0; c < count; c++) {
        couplings[r * count + c] = dotSparse(derivatives[r], offsets[r], vectors[c]);
      }
    }
  };
  const addDerivative = (
    vector: Float64Array,
    scale: number,
    derivatives: readonly Float64Array[],
    t: number,
  ): void => {
    for (let a = 0; a < 4; a++) {
      const n = offsets[t][a];
      vector[n] += scale * derivatives[t][3 * a];
      vector[n + 1] += scale * derivatives[t][3 * a + 1];
      vector[n + 2] += scale * derivatives[t][3 * a + 2];
    }
  };

  return {
    retarget: (others) => {
      if (others.length !== count) return false;
      for (let t = 0; t < count; t++) if (others[t].atoms !== torsions[t].atoms) return false;
      for (let t = 0; t < count; t++) targets[t] = others[t].target;
      return true;
    },
    soften: (x, frames, solve) => {
      derive(x, normals);
      for (let t = 0; t < count; t++) {
        tangent.fill(0);
        addDerivative(tangent, 1, normals, t);
        frames.gradientToLocal(tangent, localWays[t]);
        solve(localWays[t]);
      }
    },
    linearize: (x, frames) => {
      derive(x, normals);
      for (let t = 0; t < count; t++) frames.stepFromLocal(localWays[t], ways[t]);
    },
    flatten: (direction) => {
      couple(normals, ways);
      for (let t = 0; t < count; t++) amounts[t] = dotSparse(normals[t], offsets[t], direction);
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
        couple(normalsHere, ways);
        solveSmall(couplings, amounts, count);
        subtractAll(x, amounts, ways);
      }
      return false;
    },
    // Restoring moves along the ways, so no force along them may be left: they, not the normals, weigh the gradient.
    project: (gradient) => {
      tangent.set(gradient);
      for (let r = 0; r < count; r++) {
        amounts[r] = dotSparse(normalsHere[r], offsets[r], gradient);
        for (let c = 0; c < count; c++) {
          couplings[r * count + c] = r === c ? dot(normalsHere[r], normalsHere[r]) : overlap(r, c);
        }
      }
      solveSmall(couplings, amounts, count);
      for (let t = 0; t < count; t++) addDerivative(tangent, -amounts[t], normalsHere, t);
      couple(normalsHere, ways);
      transpose(couplings, count);
      for (let t = 0; t < count; t++) amounts[t] = dot(ways[t], gradient);
      solveSmall(couplings, amounts, count);
      for (let t = 0; t < count; t++) addDerivative(gradient, -amounts[t], normalsHere, t);
      return Math.sqrt(dot(tangent, tangent) / size);
    },
    deviation: (x) => {
      let largest = 0;
      for (let t = 0; t < count; t++) largest = Math.max(largest, Math.abs(missing(x, t)));
      return toDegrees(largest);
    },
  };

  /** Inner product of the derivatives of two torsions. */
  function overlap(r: number, c: number): number {
    let sum = 0;
    for (let a = 0; a < 4; a++) {
      for (let b = 0; b < 4; b++) {
        if (offsets[r][a] !== offsets[c][b]) continue;
        for (let p = 0; p < 3; p++) {
          sum += normalsHere[r][3 * a + p] * normalsHere[c][3 * b + p];
        }
      }
    }
    return sum;
  }
}

/** Product of a torsion's twelve derivatives with a vector of all coordinates. */
function dotSparse(derivative: Float64Array, offsets: Int32Array, vector: Float64Array): number {
  let sum = 0;
  for (let a = 0; a < 4; a++) {
    const n = offsets[a];
    sum +=
      derivative[3 * a] * vector[n] +
      derivative[3 * a + 1] * vector[n + 1] +
      derivative[3 * a + 2] * vector[n + 2];
  }
  return sum;
}

function transpose(matrix: Float64Array, count: number): void {
  for (let r = 0; r < count; r++) {
    for (let c = 0; c < r; c++) {
      const above = matrix[c * count + r];
      matrix[c * count + r] = matrix[r * count + c];
      matrix[r * count + c] = above;
    }
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
