/**
 * The memory of a limited-memory quasi-Newton method: pairs of steps and gradient changes, and the two-loop recursion
 * over them (Nocedal, Math. Comput. 1980, 35, 773).
 */

export interface History {
  /** Forgets everything. */
  clear(): void;
  /** Remembers `scale` times the `direction` that was found by `apply` at the previous gradient, with the change of gradient it made. */
  remember(
    direction: Float64Array,
    scale: number,
    previousGradient: Float64Array,
    nextGradient: Float64Array,
  ): void;
  /** Turns `vector` in place into H · vector, with `applyInitial` as the initial inverse Hessian (in place). */
  apply(vector: Float64Array, applyInitial: (vector: Float64Array) => void): void;
}

/**
 * Least curvature a pair is remembered with, as a share of what was expected along the step. A step over a saddle or a
 * plateau has met none or a negative one, which as it is would make the next directions endless in it.
 */
const LEAST_CURVATURE = 0.3;

/** Creates a memory of `depth` pairs of vectors of length `size`. */
export function createHistory(size: number, depth: number): History {
  // One array each, a row a pair: a minimization of a small molecule is soon over, and many arrays cost more than it.
  const steps = new Float64Array(depth * size);
  const changes = new Float64Array(depth * size);
  const inverseProducts = new Float64Array(depth);
  const weights = new Float64Array(depth);
  let count = 0;
  let newest = -1;

  const end = depth * size;
  const before = (row: number): number => (row === 0 ? end : row) - size;
  const after = (row: number): number => (row + size === end ? 0 : row + size);
  /**
   * Blends the change at `row` with the expected one, `scale` times `gradient`, so that their product with the step is the
   * least share of `expected` (Powell, Lecture Notes in Mathematics 1978, 630, 144).
   */
  const stiffen = (
    row: number,
    product: number,
    expected: number,
    scale: number,
    gradient: Float64Array,
  ): void => {
    const kept = ((1 - LEAST_CURVATURE) * expected) / (expected - product);
    const added = (1 - kept) * scale;
    for (let a = 0; a < size; a++) {
      changes[row + a] = kept * changes[row + a] + added * gradient[a];
    }
  };

  return {
    clear: () => {
      count = 0;
    },
    remember: (direction, scale, previousGradient, nextGradient) => {
      const slot = (newest + 1) % depth;
      const row = slot * size;
      let product = 0;
      let slope = 0;
      for (let a = 0; a < size; a++) {
        const s = scale * direction[a];
        const y = nextGradient[a] - previousGradient[a];
        steps[row + a] = s;
        changes[row + a] = y;
        product += s * y;
        slope += s * previousGradient[a];
      }
      // The direction was -H · gradient, so the change expected of the step is -scale · gradient.
      const expected = -scale * slope;
      const least = LEAST_CURVATURE * expected;
      if (!(expected > 0)) return;
      if (product < least) stiffen(row, product, expected, -scale, previousGradient);
      inverseProducts[slot] = 1 / Math.max(product, least);
      newest = slot;
      count = Math.min(count + 1, depth);
    },
    apply: (vector, applyInitial) => {
      if (count === 0) {
        applyInitial(vector);
        return;
      }
      let row = newest * size;
      let product = dotRow(steps, row, vector);
      for (let age = 0; age < count; age++) {
        const slot = row / size;
        const weight = inverseProducts[slot] * product;
        weights[slot] = weight;
        const next = before(row);
        product = addAndMultiply(vector, -weight, changes, row, steps, next);
        row = next;
      }
      applyInitial(vector);
      row = after(row);
      product = dotRow(changes, row, vector);
      for (let age = count - 1; age >= 0; age--) {
        const slot = row / size;
        const amount = weights[slot] - inverseProducts[slot] * product;
        const next = after(row);
        product = addAndMultiply(vector, amount, steps, row, changes, next);
        row = next;
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

/**
 * Adds `scale` times the row of `added` at `start` to `vector` and returns the inner product of what it became with the row
 * of `met` at `next`: one pass instead of two.
 */
function addAndMultiply(
  vector: Float64Array,
  scale: number,
  added: Float64Array,
  start: number,
  met: Float64Array,
  next: number,
): number {
  let sum0 = 0;
  let sum1 = 0;
  let sum2 = 0;
  // Vectors of atoms have three numbers an atom.
  for (let n = 0; n < vector.length; n += 3) {
    const x = vector[n] + scale * added[start + n];
    const y = vector[n + 1] + scale * added[start + n + 1];
    const z = vector[n + 2] + scale * added[start + n + 2];
    vector[n] = x;
    vector[n + 1] = y;
    vector[n + 2] = z;
    sum0 += x * met[next + n];
    sum1 += y * met[next + n + 1];
    sum2 += z * met[next + n + 2];
  }
  return sum0 + sum1 + sum2;
}
