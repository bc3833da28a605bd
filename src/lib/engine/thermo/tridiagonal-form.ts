/** A symmetric matrix brought to tridiagonal form, from which eigenvalues and solutions cost next to nothing. */
import type { Control } from '../control';
import { orthonormalize } from '../minimizer/rigid-motions';
import { createRandom } from '../random';

/** A = Q T Qᵀ with T tridiagonal and Q = H₀ H₁ H₂ … a product of Householder reflections. */
export interface TridiagonalForm {
  readonly size: number;
  /** T's diagonal, and the elements beside it (the last is unused). */
  readonly diagonal: Readonly<Float64Array>;
  readonly beside: Readonly<Float64Array>;
  /** Reflection k is 1 - 2 v vᵀ with v = row k (size long, of length 1 or all zero). */
  readonly reflections: Float64Array;
}

/**
 * Brings a symmetric matrix (size × size, row by row; the lower triangle is used up) to tridiagonal form (Golub and Van
 * Loan, Matrix Computations, algorithm 8.3.1): 4/3 size³ operations.
 */
export async function tridiagonalize(
  matrix: Float64Array,
  size: number,
  control: Control,
): Promise<TridiagonalForm> {
  const diagonal = new Float64Array(size);
  const beside = new Float64Array(size);
  const reflections = new Float64Array(size * size);
  const product = new Float64Array(size);
  for (let k = 0; k < size; k++) {
    if (control.due()) await control.pause();
    diagonal[k] = matrix[k * size + k];
    if (k + 1 === size) break;
    const v = reflections.subarray(k * size, (k + 1) * size);
    for (let i = k + 1; i < size; i++) v[i] = matrix[i * size + k];
    beside[k] = makeReflection(v, k + 1);
    reflectBothSides(matrix, size, v, k + 1, product);
  }
  return { size, diagonal, beside, reflections };
}

/** Turns a column (from `first` on) into the unit vector that reflects it onto its first element; returns that element. */
function makeReflection(v: Float64Array, first: number): number {
  let tail = 0;
  for (let i = first + 1; i < v.length; i++) tail += v[i] * v[i];
  const head = v[first];
  if (tail === 0) {
    v.fill(0);
    return head;
  }
  const length = Math.sqrt(head * head + tail);
  const reflected = head > 0 ? -length : length;
  v[first] = head - reflected;
  const norm = Math.sqrt(v[first] * v[first] + tail);
  for (let i = first; i < v.length; i++) v[i] /= norm;
  return reflected;
}

/** A ← H A H on rows and columns from `first` on, lower triangle only; `product` is room to work in. */
function reflectBothSides(
  matrix: Float64Array,
  size: number,
  v: Float64Array,
  first: number,
  product: Float64Array,
): void {
  product.fill(0);
  for (let i = first; i < size; i++) {
    const row = i * size;
    const vi = v[i];
    let sum = matrix[row + i] * vi;
    for (let j = first; j < i; j++) {
      const element = matrix[row + j];
      sum += element * v[j];
      product[j] += element * vi;
    }
    product[i] += sum;
  }
  let along = 0;
  for (let i = first; i < size; i++) along += v[i] * product[i];
  for (let i = first; i < size; i++) product[i] = 2 * (product[i] - along * v[i]);
  for (let i = first; i < size; i++) {
    const row = i * size;
    const vi = v[i];
    const pi = product[i];
    for (let j = first; j <= i; j++) matrix[row + j] -= vi * product[j] + pi * v[j];
  }
}

const MOST_ITERATIONS = 60;

/** The eigenvalues, ascending, by implicit QL with Wilkinson's shift (Golub and Van Loan, section 8.3). */
export function eigenvaluesOf({ size, diagonal, beside }: TridiagonalForm): Float64Array {
  const d = Float64Array.from(diagonal);
  const e = Float64Array.from(beside);
  for (let low = 0; low < size; low++) {
    for (let iteration = 0; ; iteration++) {
      const high = endOfBlock(d, e, low);
      if (high === low) break;
      if (iteration === MOST_ITERATIONS) throw new Error('an eigenvalue did not converge');
      chase(d, e, low, high);
    }
  }
  return d.sort();
}

/** The first row from `low` on after which the matrix falls apart. */
function endOfBlock(d: Float64Array, e: Float64Array, low: number): number {
  let high = low;
  while (high + 1 < d.length) {
    const scale = Math.abs(d[high]) + Math.abs(d[high + 1]);
    if (Math.abs(e[high]) <= Number.EPSILON * scale) break;
    high++;
  }
  return high;
}

/** One QL step on rows low to high. */
function chase(d: Float64Array, e: Float64Array, low: number, high: number): void {
  const half = (d[low + 1] - d[low]) / (2 * e[low]);
  const root = Math.hypot(half, 1);
  let bulge = d[high] - d[low] + e[low] / (half + (half >= 0 ? root : -root));
  let sine = 1;
  let cosine = 1;
  let shift = 0;
  for (let i = high - 1; i >= low; i--) {
    const f = sine * e[i];
    const b = cosine * e[i];
    const r = Math.hypot(f, bulge);
    e[i + 1] = r;
    if (r === 0) {
      d[i + 1] -= shift;
      e[high] = 0;
      return;
    }
    sine = f / r;
    cosine = bulge / r;
    const rest = d[i + 1] - shift;
    const turned = (d[i] - rest) * sine + 2 * cosine * b;
    shift = sine * turned;
    d[i + 1] = rest + shift;
    bulge = cosine * turned - b;
  }
  d[low] -= shift;
  e[low] = bulge;
  e[high] = 0;
}

/** Solves (A - shift) s = right; the matrix may be indefinite. */
export function solveWith(
  form: TridiagonalForm,
  right: Readonly<Float64Array>,
  shift = 0,
): Float64Array {
  const { size } = form;
  const s = Float64Array.from(right);
  for (let k = 0; k < size; k++) reflect(s, reflectionOf(form, k), k);
  solveTridiagonal(form, s, shift);
  for (let k = size - 1; k >= 0; k--) reflect(s, reflectionOf(form, k), k);
  return s;
}

/** Rounds of inverse iteration; each brings the vector nearer by the ratio of the distances of two eigenvalues. */
const ROUNDS = 3;

/** Orthonormal eigenvectors of A for some of its eigenvalues, by inverse iteration. */
export function eigenvectorsOf(form: TridiagonalForm, values: Readonly<Float64Array>) {
  const random = createRandom(1);
  const vectors: Float64Array[] = [];
  for (const value of values) {
    let vector: Float64Array = Float64Array.from(
      { length: form.size },
      () => random.uniform() - 0.5,
    );
    for (let round = 0; round < ROUNDS; round++) {
      vector = solveWith(form, vector, value);
      orthonormalize(vector, vectors);
    }
    vectors.push(vector);
  }
  return vectors;
}

function reflectionOf({ size, reflections }: TridiagonalForm, k: number): Float64Array {
  return reflections.subarray(k * size, (k + 1) * size);
}

function reflect(s: Float64Array, v: Readonly<Float64Array>, k: number): void {
  let along = 0;
  for (let i = k + 1; i < s.length; i++) along += s[i] * v[i];
  for (let i = k + 1; i < s.length; i++) s[i] -= 2 * along * v[i];
}

/** Solves (T - shift) s = s in place by elimination, with exchange of neighboring rows where the lower has the larger pivot. */
function solveTridiagonal(
  { size, diagonal, beside }: TridiagonalForm,
  s: Float64Array,
  shift: number,
): void {
  const d = diagonal.map((value) => value - shift);
  const upper = beside.slice();
  const second = new Float64Array(size);
  const scale = d.reduce((largest, value) => Math.max(largest, Math.abs(value)), 0);
  // Where the shift is an eigenvalue a pivot vanishes; what is then divided by instead points along its vector.
  const leastPivot = Number.EPSILON * scale || Number.MIN_VALUE;
  const pivot = (i: number): number => (Math.abs(d[i]) < leastPivot ? leastPivot : d[i]);
  for (let i = 0; i + 1 < size; i++) {
    let below = beside[i];
    if (Math.abs(below) > Math.abs(d[i])) {
      [d[i], below] = [below, d[i]];
      [upper[i], d[i + 1]] = [d[i + 1], upper[i]];
      [second[i], upper[i + 1]] = [upper[i + 1], 0];
      [s[i], s[i + 1]] = [s[i + 1], s[i]];
    }
    const factor = below / pivot(i);
    d[i + 1] -= factor * upper[i];
    upper[i + 1] -= factor * second[i];
    s[i + 1] -= factor * s[i];
  }
  for (let i = size - 1; i >= 0; i--) {
    const next = i + 1 < size ? upper[i] * s[i + 1] : 0;
    const afterNext = i + 2 < size ? second[i] * s[i + 2] : 0;
    s[i] = (s[i] - next - afterNext) / pivot(i);
  }
}
