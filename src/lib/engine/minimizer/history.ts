/**
 * The memory of a limited-memory quasi-Newton method: pairs of steps and gradient changes, and the two-loop recursion
 * over them (Nocedal, Math. Comput. 1980, 35, 773).
 */

export interface History {
  /** Forgets everything. */
  clear(): void;
  /** Remembers `scale` times `direction` with the change of gradient it made, unless its curvature is not safely positive. */
  remember(
    direction: Float64Array,
    scale: number,
    previousGradient: Float64Array,
    nextGradient: Float64Array,
  ): void;
  /** Turns `vector` in place into H · vector, with `applyInitial` as the initial inverse Hessian (in place). */
  apply(vector: Float64Array, applyInitial: (vector: Float64Array) => void): void;
}

/** Creates a memory of `depth` pairs of vectors of length `size`. */
export function createHistory(size: number, depth: number): History {
  // One array each, a row a pair: a minimization of a small molecule is soon over, and many arrays cost more than it.
  const steps = new Float64Array(depth * size);
  const changes = new Float64Array(depth * size);
  const inverseProducts = new Float64Array(depth);
  const weights = new Float64Array(depth);
  let count = 0;
  let newest = -1;

  return {
    clear: () => {
      count = 0;
    },
    remember: (direction, scale, previousGradient, nextGradient) => {
      const slot = (newest + 1) % depth;
      const row = slot * size;
      let product = 0;
      let stepSquare = 0;
      let changeSquare = 0;
      for (let a = 0; a < size; a++) {
        const s = scale * direction[a];
        const y = nextGradient[a] - previousGradient[a];
        steps[row + a] = s;
        changes[row + a] = y;
        product += s * y;
        stepSquare += s * s;
        changeSquare += y * y;
      }
      if (product <= 1e-10 * Math.sqrt(stepSquare * changeSquare)) return;
      inverseProducts[slot] = 1 / product;
      newest = slot;
      count = Math.min(count + 1, depth);
    },
    apply: (vector, applyInitial) => {
      for (let age = 0; age < count; age++) {
        const slot = (newest - age + depth) % depth;
        const weight = inverseProducts[slot] * dotRow(steps, slot * size, vector);
        weights[slot] = weight;
        addRow(vector, -weight, changes, slot * size);
      }
      applyInitial(vector);
      for (let age = count - 1; age >= 0; age--) {
        const slot = (newest - age + depth) % depth;
        const correction = inverseProducts[slot] * dotRow(changes, slot * size, vector);
        addRow(vector, weights[slot] - correction, steps, slot * size);
      }
    },
  };
}

/** Inner product of two vectors of one length. */
export function dot(a: Float64Array, b: Float64Array): number {
  return dotRow(a, 0, b);
}

/** Inner product of a vector and as many numbers of `rows` from `start` on. */
export function dotRow(rows: Float64Array, start: number, vector: Float64Array): number {
  // Four sums, because each addition would otherwise wait for the one before.
  let sum0 = 0;
  let sum1 = 0;
  let sum2 = 0;
  let sum3 = 0;
  let n = 0;
  for (; n < vector.length - 3; n += 4) {
    sum0 += rows[start + n] * vector[n];
    sum1 += rows[start + n + 1] * vector[n + 1];
    sum2 += rows[start + n + 2] * vector[n + 2];
    sum3 += rows[start + n + 3] * vector[n + 3];
  }
  for (; n < vector.length; n++) sum0 += rows[start + n] * vector[n];
  return sum0 + sum1 + (sum2 + sum3);
}

function addRow(target: Float64Array, scale: number, rows: Float64Array, start: number): void {
  for (let n = 0; n < target.length; n++) target[n] += scale * rows[start + n];
}
