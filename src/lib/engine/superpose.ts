/** Best superposition of two geometries: proper rotations only, so mirror images stay apart. */

/** A geometry laid over another one. */
export interface Superposition {
  /** Root-mean-square distance over the chosen atoms, Å. */
  readonly rmsd: number;
  /** All atoms of the moved geometry after the turn, Å, 3N. */
  readonly coordinates: Float64Array;
}

/**
 * Lays `moving` over `fixed` so that the chosen atoms match best, atom for atom, with Horn's closed-form quaternion
 * (J. Opt. Soc. Am. A 1987, 4, 629), and moves all atoms along. One atom, two atoms and points on a line or in a plane
 * are handled; several rotations are then equally good and one is taken.
 */
export function superpose(
  moving: Readonly<Float64Array>,
  fixed: Readonly<Float64Array>,
  atoms: ArrayLike<number>,
): Superposition {
  const frame = compare(moving, fixed, atoms, atoms);
  const rotation = rotationMatrix(frame.quaternion);
  const coordinates = new Float64Array(moving.length);
  const [a, b] = [frame.movingCenter, frame.fixedCenter];
  for (let n = 0; n < moving.length; n += 3) {
    const x = moving[n] - a[0];
    const y = moving[n + 1] - a[1];
    const z = moving[n + 2] - a[2];
    for (let row = 0; row < 3; row++) {
      coordinates[n + row] =
        rotation[3 * row] * x + rotation[3 * row + 1] * y + rotation[3 * row + 2] * z + b[row];
    }
  }
  let sum = 0;
  for (let n = 0; n < atoms.length; n++) {
    for (let axis = 0; axis < 3; axis++) {
      sum += (coordinates[3 * atoms[n] + axis] - fixed[3 * atoms[n] + axis]) ** 2;
    }
  }
  return { rmsd: Math.sqrt(sum / Math.max(1, atoms.length)), coordinates };
}

/**
 * Smallest root-mean-square distance, Å, between atoms `from` of `moving` and atoms `to` of `fixed`, pair by pair.
 * Good to about 1e-6 Å; identical geometries may show that much.
 */
export function bestRmsd(
  moving: Readonly<Float64Array>,
  fixed: Readonly<Float64Array>,
  from: ArrayLike<number>,
  to: ArrayLike<number> = from,
): number {
  const { size, overlap } = compare(moving, fixed, from, to);
  return Math.sqrt(Math.max(0, size - 2 * overlap) / Math.max(1, from.length));
}

interface Frame {
  readonly movingCenter: readonly number[];
  readonly fixedCenter: readonly number[];
  /** Sum of squared distances of both sets from their centers. */
  readonly size: number;
  /** Largest eigenvalue of Horn's matrix. */
  readonly overlap: number;
  readonly quaternion: readonly number[];
}

function centerOf(x: Readonly<Float64Array>, atoms: ArrayLike<number>): number[] {
  const center = [0, 0, 0];
  for (let n = 0; n < atoms.length; n++) {
    for (let axis = 0; axis < 3; axis++) center[axis] += x[3 * atoms[n] + axis] / atoms.length;
  }
  return center;
}

function compare(
  moving: Readonly<Float64Array>,
  fixed: Readonly<Float64Array>,
  from: ArrayLike<number>,
  to: ArrayLike<number>,
): Frame {
  const movingCenter = centerOf(moving, from);
  const fixedCenter = centerOf(fixed, to);
  let [xx, xy, xz, yx, yy, yz, zx, zy, zz, size] = new Float64Array(10);
  for (let n = 0; n < from.length; n++) {
    const ax = moving[3 * from[n]] - movingCenter[0];
    const ay = moving[3 * from[n] + 1] - movingCenter[1];
    const az = moving[3 * from[n] + 2] - movingCenter[2];
    const bx = fixed[3 * to[n]] - fixedCenter[0];
    const by = fixed[3 * to[n] + 1] - fixedCenter[1];
    const bz = fixed[3 * to[n] + 2] - fixedCenter[2];
    size += ax * ax + ay * ay + az * az + bx * bx + by * by + bz * bz;
    xx += ax * bx;
    xy += ax * by;
    xz += ax * bz;
    yx += ay * bx;
    yy += ay * by;
    yz += ay * bz;
    zx += az * bx;
    zy += az * by;
    zz += az * bz;
  }
  // Horn's symmetric 4 × 4 matrix, row by row.
  const matrix = [
    ...[xx + yy + zz, yz - zy, zx - xz, xy - yx],
    ...[yz - zy, xx - yy - zz, xy + yx, zx + xz],
    ...[zx - xz, xy + yx, yy - xx - zz, yz + zy],
    ...[xy - yx, zx + xz, yz + zy, zz - xx - yy],
  ];
  const { value, vector } = largestEigenpair(matrix);
  return { movingCenter, fixedCenter, size, overlap: value, quaternion: vector };
}

/** Largest eigenvalue and its eigenvector of a symmetric 4 × 4 matrix by Jacobi rotations; the matrix is used up. */
function largestEigenpair(matrix: number[]): { value: number; vector: number[] } {
  const vectors = [1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1];
  const scale = matrix.reduce((sum, entry) => sum + entry * entry, 0);
  for (let sweep = 0; sweep < 30; sweep++) {
    let rest = 0;
    for (let p = 0; p < 3; p++) for (let q = p + 1; q < 4; q++) rest += matrix[4 * p + q] ** 2;
    if (rest <= 1e-30 * scale) break;
    for (let p = 0; p < 3; p++) for (let q = p + 1; q < 4; q++) rotate(matrix, vectors, p, q);
  }
  let best = 0;
  for (let n = 1; n < 4; n++) if (matrix[5 * n] > matrix[5 * best]) best = n;
  return { value: matrix[5 * best], vector: [0, 1, 2, 3].map((row) => vectors[4 * row + best]) };
}

function rotate(matrix: number[], vectors: number[], p: number, q: number): void {
  const off = matrix[4 * p + q];
  if (off === 0) return;
  const theta = (matrix[5 * q] - matrix[5 * p]) / (2 * off);
  const t = (theta >= 0 ? 1 : -1) / (Math.abs(theta) + Math.hypot(theta, 1));
  const c = 1 / Math.hypot(t, 1);
  const s = t * c;
  for (let n = 0; n < 4; n++) {
    const [a, b] = [matrix[4 * n + p], matrix[4 * n + q]];
    matrix[4 * n + p] = c * a - s * b;
    matrix[4 * n + q] = s * a + c * b;
  }
  for (let n = 0; n < 4; n++) {
    const [a, b] = [matrix[4 * p + n], matrix[4 * q + n]];
    matrix[4 * p + n] = c * a - s * b;
    matrix[4 * q + n] = s * a + c * b;
    const [u, v] = [vectors[4 * n + p], vectors[4 * n + q]];
    vectors[4 * n + p] = c * u - s * v;
    vectors[4 * n + q] = s * u + c * v;
  }
}

function rotationMatrix([w, x, y, z]: readonly number[]): number[] {
  return [
    ...[w * w + x * x - y * y - z * z, 2 * (x * y - w * z), 2 * (x * z + w * y)],
    ...[2 * (x * y + w * z), w * w - x * x + y * y - z * z, 2 * (y * z - w * x)],
    ...[2 * (x * z - w * y), 2 * (y * z + w * x), w * w - x * x - y * y + z * z],
  ];
}
