/**
 * Cholesky factorization of a sparse symmetric positive definite matrix in 3 × 3 blocks, one row and column of blocks
 * an atom (George and Liu, Computer Solution of Large Sparse Positive Definite Systems, 1981).
 */
import type { EliminationPlan } from './elimination';

export interface BlockFactor {
  readonly plan: EliminationPlan;
  /** Nine numbers a block, row by row; the diagonal blocks hold inverse pivots on their diagonals. */
  readonly blocks: Float64Array;
}

/** Makes room for a factor. */
export function createFactor(plan: EliminationPlan): BlockFactor {
  return { plan, blocks: new Float64Array(9 * plan.rows.length) };
}

/** Factorizes `matrix` (full, row by row) + `shift` · 1, which must vanish outside the plan's pattern. */
export function factorize(factor: BlockFactor, matrix: Float64Array, shift: number): void {
  const { plan, blocks } = factor;
  const { columnStarts, targets } = plan;
  gather(factor, matrix, shift);
  let target = 0;
  for (let c = 0; c < columnStarts.length - 1; c++) {
    const first = columnStarts[c];
    const end = columnStarts[c + 1];
    factorizeDiagonal(blocks, 9 * first, shift);
    for (let p = first + 1; p < end; p++) divideByDiagonal(blocks, 9 * p, 9 * first);
    for (let s = first + 1; s < end; s++) {
      for (let r = s; r < end; r++) {
        subtractProduct(blocks, 9 * targets[target], 9 * r, 9 * s);
        target++;
      }
    }
  }
}

function gather({ plan, blocks }: BlockFactor, matrix: Float64Array, shift: number): void {
  const { order, columnStarts, rows } = plan;
  const size = 3 * order.length;
  for (let c = 0; c < order.length; c++) {
    for (let p = columnStarts[c]; p < columnStarts[c + 1]; p++) {
      const start = 3 * order[rows[p]] * size + 3 * order[c];
      for (let n = 0; n < 3; n++) {
        blocks[9 * p + 3 * n] = matrix[start + n * size];
        blocks[9 * p + 3 * n + 1] = matrix[start + n * size + 1];
        blocks[9 * p + 3 * n + 2] = matrix[start + n * size + 2];
      }
    }
    const diagonal = 9 * columnStarts[c];
    blocks[diagonal] += shift;
    blocks[diagonal + 4] += shift;
    blocks[diagonal + 8] += shift;
  }
}

/** Replaces the block at `d` by its lower Cholesky factor with inverse pivots; none is smaller than `smallest`. */
function factorizeDiagonal(b: Float64Array, d: number, smallest: number): void {
  const p0 = 1 / Math.sqrt(Math.max(b[d], smallest));
  const l10 = b[d + 3] * p0;
  const l20 = b[d + 6] * p0;
  const p1 = 1 / Math.sqrt(Math.max(b[d + 4] - l10 * l10, smallest));
  const l21 = (b[d + 7] - l20 * l10) * p1;
  const p2 = 1 / Math.sqrt(Math.max(b[d + 8] - l20 * l20 - l21 * l21, smallest));
  b[d] = p0;
  b[d + 3] = l10;
  b[d + 4] = p1;
  b[d + 6] = l20;
  b[d + 7] = l21;
  b[d + 8] = p2;
}

/** block(r) ← block(r) · L⁻ᵀ with L the factorized diagonal block at d. */
function divideByDiagonal(b: Float64Array, r: number, d: number): void {
  for (let row = r; row < r + 9; row += 3) {
    const x0 = b[row] * b[d];
    const x1 = (b[row + 1] - x0 * b[d + 3]) * b[d + 4];
    b[row] = x0;
    b[row + 1] = x1;
    b[row + 2] = (b[row + 2] - x0 * b[d + 6] - x1 * b[d + 7]) * b[d + 8];
  }
}

/** block(t) ← block(t) - block(r) · block(s)ᵀ. */
function subtractProduct(b: Float64Array, t: number, r: number, s: number): void {
  const s00 = b[s];
  const s01 = b[s + 1];
  const s02 = b[s + 2];
  const s10 = b[s + 3];
  const s11 = b[s + 4];
  const s12 = b[s + 5];
  const s20 = b[s + 6];
  const s21 = b[s + 7];
  const s22 = b[s + 8];
  for (let n = 0; n < 9; n += 3) {
    const r0 = b[r + n];
    const r1 = b[r + n + 1];
    const r2 = b[r + n + 2];
    b[t + n] -= r0 * s00 + r1 * s01 + r2 * s02;
    b[t + n + 1] -= r0 * s10 + r1 * s11 + r2 * s12;
    b[t + n + 2] -= r0 * s20 + r1 * s21 + r2 * s22;
  }
}

/** Turns `vector` in place into the solution of the factorized system. */
export function solve({ plan, blocks: b }: BlockFactor, vector: Float64Array): void {
  const { columnStarts, rowOffsets } = plan;
  const columns = columnStarts.length - 1;
  for (let c = 0; c < columns; c++) {
    const first = columnStarts[c];
    const v = rowOffsets[first];
    const d = 9 * first;
    const y0 = vector[v] * b[d];
    const y1 = (vector[v + 1] - b[d + 3] * y0) * b[d + 4];
    const y2 = (vector[v + 2] - b[d + 6] * y0 - b[d + 7] * y1) * b[d + 8];
    vector[v] = y0;
    vector[v + 1] = y1;
    vector[v + 2] = y2;
    for (let p = first + 1; p < columnStarts[c + 1]; p++) {
      const w = rowOffsets[p];
      const q = 9 * p;
      vector[w] -= b[q] * y0 + b[q + 1] * y1 + b[q + 2] * y2;
      vector[w + 1] -= b[q + 3] * y0 + b[q + 4] * y1 + b[q + 5] * y2;
      vector[w + 2] -= b[q + 6] * y0 + b[q + 7] * y1 + b[q + 8] * y2;
    }
  }
  for (let c = columns - 1; c >= 0; c--) {
    const first = columnStarts[c];
    const v = rowOffsets[first];
    const d = 9 * first;
    let z0 = vector[v];
    let z1 = vector[v + 1];
    let z2 = vector[v + 2];
    for (let p = first + 1; p < columnStarts[c + 1]; p++) {
      const w = rowOffsets[p];
      const q = 9 * p;
      const w0 = vector[w];
      const w1 = vector[w + 1];
      const w2 = vector[w + 2];
      z0 -= b[q] * w0 + b[q + 3] * w1 + b[q + 6] * w2;
      z1 -= b[q + 1] * w0 + b[q + 4] * w1 + b[q + 7] * w2;
      z2 -= b[q + 2] * w0 + b[q + 5] * w1 + b[q + 8] * w2;
    }
    z2 *= b[d + 8];
    z1 = (z1 - b[d + 7] * z2) * b[d + 4];
    vector[v] = (z0 - b[d + 3] * z1 - b[d + 6] * z2) * b[d];
    vector[v + 1] = z1;
    vector[v + 2] = z2;
  }
}
