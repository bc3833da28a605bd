/** A molecule as a rigid body: its principal moments of inertia, and the directions in which it moves as a whole. */
import { diagonalize } from '../minimizer/eigen';

export interface RigidFrame {
  /** Principal moments of inertia, g/mol Å², ascending. */
  readonly moments: readonly number[];
  /** How many axes it can be seen turning about: 3, 2 for a line, 0 for a point. */
  readonly axes: number;
  /** Orthonormal directions (each 3N) of translations and rotations in mass-weighted coordinates √m·x. */
  readonly motions: readonly Float64Array[];
}

/** A moment below this is that of a line about itself, g/mol Å²; the smallest real one, of water, is 0.6. */
const NO_MOMENT = 0.01;

/** The frame of a geometry (Å, 3N) with the masses of its atoms, g/mol. */
export function rigidFrame(x: Readonly<Float64Array>, masses: readonly number[]): RigidFrame {
  const centered = aboutCenterOfMass(x, masses);
  const { values, vectors } = diagonalize(inertiaTensor(centered, masses), 3);
  const turning = [0, 1, 2].filter((n) => values[n] > NO_MOMENT);
  const axes = turning.length;
  const roots = masses.map(Math.sqrt);
  const translations = [0, 1, 2].map((axis) => {
    const motion = new Float64Array(x.length);
    roots.forEach((root, atom) => (motion[3 * atom + axis] = root));
    return motion;
  });
  const rotations = turning.map((n) => rotationAbout(vectors[n], centered, roots));
  return {
    moments: Array.from(values, (value) => Math.max(0, value)),
    axes,
    motions: [...translations, ...rotations].map(normalized),
  };
}

function aboutCenterOfMass(x: Readonly<Float64Array>, masses: readonly number[]): Float64Array {
  const total = masses.reduce((sum, mass) => sum + mass, 0);
  const center = [0, 0, 0];
  for (let a = 0; a < x.length; a++) center[a % 3] += (masses[Math.floor(a / 3)] * x[a]) / total;
  return Float64Array.from(x, (value, a) => value - center[a % 3]);
}

function inertiaTensor(x: Float64Array, masses: readonly number[]): Float64Array {
  const tensor = new Float64Array(9);
  masses.forEach((mass, atom) => {
    const place = x.subarray(3 * atom, 3 * atom + 3);
    const square = place[0] ** 2 + place[1] ** 2 + place[2] ** 2;
    for (let p = 0; p < 3; p++) {
      for (let q = 0; q < 3; q++) {
        tensor[3 * p + q] += mass * ((p === q ? square : 0) - place[p] * place[q]);
      }
    }
  });
  return tensor;
}

function rotationAbout(
  axis: Readonly<Float64Array>,
  x: Float64Array,
  roots: readonly number[],
): Float64Array {
  const motion = new Float64Array(x.length);
  roots.forEach((root, atom) => {
    for (let p = 0; p < 3; p++) {
      const q = (p + 1) % 3;
      const r = (p + 2) % 3;
      motion[3 * atom + p] = root * (axis[q] * x[3 * atom + r] - axis[r] * x[3 * atom + q]);
    }
  });
  return motion;
}

function normalized(vector: Float64Array): Float64Array {
  const length = Math.hypot(...vector);
  return vector.map((value) => value / length);
}
