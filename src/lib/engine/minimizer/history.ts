/**
 * The memory of a limited-memory quasi-Newton method: pairs of steps and gradient changes, and the two-loop recursion
 * over them (Nocedal, Math. Comput. 1980, 35, 773).
 */

export interface History {
  /** Forgets everything. */
  clear(): void;
  /** Remembers the step `next - previous` with its change of gradient, unless its curvature is not safely positive. */
  remember(
    previous: Float64Array,
    next: Float64Array,
    previousGradient: Float64Array,
    nextGradient: Float64Array,
  ): void;
  /** Turns `vector` in place into H · vector, with `applyInitial` as the initial inverse Hessian (in place). */
  apply(vector: Float64Array, applyInitial: (vector: Float64Array) => void): void;
}

/** Creates a memory of `depth` pairs of vectors of length `size`. */
export function createHistory(size: number, depth: number): History {
  const steps = Array.from({ length: depth }, () => new Float64Array(size));
  const changes = Array.from({ length: depth }, () => new Float64Array(size));
  const inverseProducts = new Float64Array(depth);
  const weights = new Float64Array(depth);
  let count = 0;
  let newest = -1;

  return {
    clear: () => {
      count = 0;
    },
    remember: (previous, next, previousGradient, nextGradient) => {
      const slot = (newest + 1) % depth;
      const step = steps[slot];
      const change = changes[slot];
      let product = 0;
      let stepSquare = 0;
      let changeSquare = 0;
      for (let a = 0; a < size; a++) {
        const s = next[a] - previous[a];
        const y = nextGradient[a] - previousGradient[a];
        step[a] = s;
        change[a] = y;
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
        const weight = inverseProducts[slot] * dot(steps[slot], vector);
        weights[slot] = weight;
        addScaled(vector, -weight, changes[slot]);
      }
      applyInitial(vector);
      for (let age = count - 1; age >= 0; age--) {
        const slot = (newest - age + depth) % depth;
        const correction = inverseProducts[slot] * dot(changes[slot], vector);
        addScaled(vector, weights[slot] - correction, steps[slot]);
      }
    },
  };
}

/** Inner product of two vectors of one length. */
export function dot(a: Float64Array, b: Float64Array): number {
  // Four sums, because each addition would otherwise wait for the one before.
  let sum0 = 0;
  let sum1 = 0;
  let sum2 = 0;
  let sum3 = 0;
  let n = 0;
  for (; n < a.length - 3; n += 4) {
    sum0 += a[n] * b[n];
    sum1 += a[n + 1] * b[n + 1];
    sum2 += a[n + 2] * b[n + 2];
    sum3 += a[n + 3] * b[n + 3];
  }
  for (; n < a.length; n++) sum0 += a[n] * b[n];
  return sum0 + sum1 + (sum2 + sum3);
}

function addScaled(target: Float64Array, scale: number, source: Float64Array): void {
  for (let n = 0; n < target.length; n++) target[n] += scale * source[n];
}
