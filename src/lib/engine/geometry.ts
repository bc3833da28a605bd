/** Distances, angles and torsions of points in a flat coordinate array (x0, y0, z0, x1, …), Å and degrees. */
import { toDegrees, toRadians } from './units';

/** Distance between two atoms, Å. */
export function distance(x: Float64Array, i: number, j: number): number {
  return Math.hypot(x[3 * i] - x[3 * j], x[3 * i + 1] - x[3 * j + 1], x[3 * i + 2] - x[3 * j + 2]);
}

/** Angle i-j-k at j, degrees in [0, 180]. */
export function angle(x: Float64Array, i: number, j: number, k: number): number {
  const ux = x[3 * i] - x[3 * j];
  const uy = x[3 * i + 1] - x[3 * j + 1];
  const uz = x[3 * i + 2] - x[3 * j + 2];
  const vx = x[3 * k] - x[3 * j];
  const vy = x[3 * k + 1] - x[3 * j + 1];
  const vz = x[3 * k + 2] - x[3 * j + 2];
  const cx = uy * vz - uz * vy;
  const cy = uz * vx - ux * vz;
  const cz = ux * vy - uy * vx;
  return toDegrees(Math.atan2(Math.hypot(cx, cy, cz), ux * vx + uy * vy + uz * vz));
}

/** Torsion i-j-k-l, degrees in (-180, 180]; clockwise from i to l is positive, seen from j to k (IUPAC). */
export function torsion(x: Float64Array, i: number, j: number, k: number, l: number): number {
  const ax = x[3 * j] - x[3 * i];
  const ay = x[3 * j + 1] - x[3 * i + 1];
  const az = x[3 * j + 2] - x[3 * i + 2];
  const bx = x[3 * k] - x[3 * j];
  const by = x[3 * k + 1] - x[3 * j + 1];
  const bz = x[3 * k + 2] - x[3 * j + 2];
  const cx = x[3 * l] - x[3 * k];
  const cy = x[3 * l + 1] - x[3 * k + 1];
  const cz = x[3 * l + 2] - x[3 * k + 2];
  const mx = ay * bz - az * by;
  const my = az * bx - ax * bz;
  const mz = ax * by - ay * bx;
  const nx = by * cz - bz * cy;
  const ny = bz * cx - bx * cz;
  const nz = bx * cy - by * cx;
  const sine = (ax * nx + ay * ny + az * nz) * Math.hypot(bx, by, bz);
  const value = toDegrees(Math.atan2(sine, mx * nx + my * ny + mz * nz));
  return value <= -180 ? 180 : value;
}

/** Turns `atoms` by `degrees` about the axis j → k, in place; positive raises the torsion i-j-k-l when l turns. */
export function rotateAbout(
  x: Float64Array,
  atoms: ArrayLike<number>,
  j: number,
  k: number,
  degrees: number,
): void {
  let ux = x[3 * k] - x[3 * j];
  let uy = x[3 * k + 1] - x[3 * j + 1];
  let uz = x[3 * k + 2] - x[3 * j + 2];
  const length = Math.hypot(ux, uy, uz);
  ux /= length;
  uy /= length;
  uz /= length;
  const cos = Math.cos(toRadians(degrees));
  const sin = Math.sin(toRadians(degrees));
  for (let n = 0; n < atoms.length; n++) {
    const a = 3 * atoms[n];
    const px = x[a] - x[3 * j];
    const py = x[a + 1] - x[3 * j + 1];
    const pz = x[a + 2] - x[3 * j + 2];
    // Rodrigues' rotation formula.
    const along = (ux * px + uy * py + uz * pz) * (1 - cos);
    x[a] = x[3 * j] + px * cos + (uy * pz - uz * py) * sin + ux * along;
    x[a + 1] = x[3 * j + 1] + py * cos + (uz * px - ux * pz) * sin + uy * along;
    x[a + 2] = x[3 * j + 2] + pz * cos + (ux * py - uy * px) * sin + uz * along;
  }
}
