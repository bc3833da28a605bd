/** A torsion and its derivatives (Blondel and Karplus, J. Comput. Chem. 1996, 17, 1132). */
import { COLLINEAR_GUARD } from './constants';

/** Cosine and sine of the torsion at hand, both times one positive number. */
const bothParts = new Float64Array(2);

/**
 * Writes the derivatives of the torsion by i, j, k, l (12 numbers, 1/Å) and returns it in radians in [-π, π];
 * `offsets` are three times the atoms' indices. Smooth at 0 and π; small where three atoms are collinear.
 */
export function torsionDerivative(
  x: Float64Array,
  offsets: Int32Array,
  derivative: Float64Array,
): number {
  torsionParts(x, offsets, derivative, bothParts);
  return Math.atan2(bothParts[1], bothParts[0]);
}

/** Writes the same derivatives, and the torsion's cosine and sine, both times one positive number, to `parts`. */
export function torsionParts(
  x: Float64Array,
  offsets: Int32Array,
  derivative: Float64Array,
  parts: Float64Array,
): void {
  const i = offsets[0];
  const j = offsets[1];
  const k = offsets[2];
  const l = offsets[3];
  const ax = x[j] - x[i];
  const ay = x[j + 1] - x[i + 1];
  const az = x[j + 2] - x[i + 2];
  const bx = x[k] - x[j];
  const by = x[k + 1] - x[j + 1];
  const bz = x[k + 2] - x[j + 2];
  const dx = x[l] - x[k];
  const dy = x[l + 1] - x[k + 1];
  const dz = x[l + 2] - x[k + 2];
  const mx = ay * bz - az * by;
  const my = az * bx - ax * bz;
  const mz = ax * by - ay * bx;
  const nx = by * dz - bz * dy;
  const ny = bz * dx - bx * dz;
  const nz = bx * dy - by * dx;
  const bb = bx * bx + by * by + bz * bz + COLLINEAR_GUARD;
  const b = Math.sqrt(bb);
  const onI = -b / (mx * mx + my * my + mz * mz + COLLINEAR_GUARD);
  const onL = b / (nx * nx + ny * ny + nz * nz + COLLINEAR_GUARD);
  const ab = (ax * bx + ay * by + az * bz) / bb;
  const db = (dx * bx + dy * by + dz * bz) / bb;
  derivative[0] = onI * mx;
  derivative[1] = onI * my;
  derivative[2] = onI * mz;
  derivative[9] = onL * nx;
  derivative[10] = onL * ny;
  derivative[11] = onL * nz;
  for (let p = 0; p < 3; p++) {
    const shift = -ab * derivative[p] + db * derivative[9 + p];
    derivative[3 + p] = -derivative[p] + shift;
    derivative[6 + p] = -derivative[9 + p] - shift;
  }
  parts[0] = mx * nx + my * ny + mz * nz;
  parts[1] = b * (ax * nx + ay * ny + az * nz);
}
