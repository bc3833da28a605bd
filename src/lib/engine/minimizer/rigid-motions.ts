/** Translations and rotations of a whole molecule, which no internal energy feels. */
import { dot } from './history';

/** Orthonormal directions (each 3N) of the rigid motions at `x`: six, five for a line, three for a point. */
export function rigidMotions(x: Readonly<Float64Array>): Float64Array[] {
  const center = [0, 0, 0];
  for (let a = 0; a < x.length; a++) center[a % 3] += (3 * x[a]) / x.length;
  const motions: Float64Array[] = [];
  for (let axis = 0; axis < 6; axis++) {
    const motion = new Float64Array(x.length);
    const p = (axis + 1) % 3;
    const q = (axis + 2) % 3;
    for (let a = 0; a < x.length; a += 3) {
      if (axis < 3) motion[a + axis] = 1;
      else {
        motion[a + p] = -(x[a + q] - center[q]);
        motion[a + q] = x[a + p] - center[p];
      }
    }
    if (orthonormalize(motion, motions)) motions.push(motion);
  }
  return motions;
}

/**
 * Takes the parts along `basis` (orthonormal) out of `vector` and brings it to length 1; false where next to nothing
 * of it is left.
 */
export function orthonormalize(vector: Float64Array, basis: readonly Float64Array[]): boolean {
  const before = Math.sqrt(dot(vector, vector));
  // Twice, because once leaves rounding errors that grow.
  for (let pass = 0; pass < 2; pass++) {
    for (const direction of basis) {
      const part = dot(vector, direction);
      for (let a = 0; a < vector.length; a++) vector[a] -= part * direction[a];
    }
  }
  const after = Math.sqrt(dot(vector, vector));
  if (!(after > 1e-8 * before)) return false;
  for (let a = 0; a < vector.length; a++) vector[a] /= after;
  return true;
}
