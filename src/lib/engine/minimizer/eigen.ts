/** Eigenvalues and eigenvectors of small symmetric matrices. */

export interface Eigensystem {
  /** Ascending. */
  readonly values: Float64Array;
  /** vectors[n] belongs to values[n]; of length 1. */
  readonly vectors: readonly Float64Array[];
}

const SWEEPS = 60;

/** Diagonalizes a symmetric matrix (size × size, row by row; kept) by cyclic Jacobi rotations. */
export function diagonalize(matrix: Readonly<Float64Array>, size: number): Eigensystem {
  const a = Float64Array.from(matrix);
  const turned = Array.from({ length: size }, (_, n) => {
    const unit = new Float64Array(size);
    unit[n] = 1;
    return unit;
  });
  for (let sweep = 0; sweep < SWEEPS; sweep++) {
    let off = 0;
    let diagonal = 0;
    for (let p = 0; p < size; p++) {
      diagonal += a[p * size + p] ** 2;
      for (let q = 0; q < p; q++) off += a[p * size + q] ** 2;
    }
    if (off <= 1e-30 * diagonal) break;
    for (let p = 0; p < size; p++) for (let q = p + 1; q < size; q++) rotate(a, turned, size, p, q);
  }
  const order = Array.from({ length: size }, (_, n) => n);
  order.sort((p, q) => a[p * size + p] - a[q * size + q]);
  return {
    values: Float64Array.from(order, (n) => a[n * size + n]),
    vectors: order.map((n) => turned[n]),
  };
}

/** One rotation that makes the element (p, q) vanish (Golub and Van Loan, Matrix Computations, section 8.5). */
function rotate(
  a: Float64Array,
  turned: readonly Float64Array[],
  size: number,
  p: number,
  q: number,
): void {
  const apq = a[p * size + q];
  if (apq === 0) return;
  const tau = (a[q * size + q] - a[p * size + p]) / (2 * apq);
  const t = (tau >= 0 ? 1 : -1) / (Math.abs(tau) + Math.sqrt(1 + tau * tau));
  const c = 1 / Math.sqrt(1 + t * t);
  const s = t * c;
  for (let k = 0; k < size; k++) {
    const kp = a[k * size + p];
    const kq = a[k * size + q];
    a[k * size + p] = c * kp - s * kq;
    a[k * size + q] = s * kp + c * kq;
  }
  for (let k = 0; k < size; k++) {
    const pk = a[p * size + k];
    const qk = a[q * size + k];
    a[p * size + k] = c * pk - s * qk;
    a[q * size + k] = s * pk + c * qk;
  }
  for (let k = 0; k < size; k++) {
    const vp = turned[p][k];
    const vq = turned[q][k];
    turned[p][k] = c * vp - s * vq;
    turned[q][k] = s * vp + c * vq;
  }
}
