/** The local π axis of an atom, and how far two of them are turned out of a common plane about their bond. */
import { toDegrees, toRadians } from '../units';

/** Below this sine the bonds at an atom are collinear, and no plane, hence no single π axis, is defined. */
const LINEAR_SINE = 0.1;

export type Vector = readonly [number, number, number];

/**
 * The axis of the p orbital at an atom: the normal of the plane through the tips of the unit vectors along its bonds,
 * which makes equal angles with all three of them, so that it stays meaningful at a slightly pyramidal atom (the
 * π-orbital axis vector of Haddon, Acc. Chem. Res. 1988, 21, 243). With two bonds it is the normal of their plane.
 * The sign is arbitrary. Null where the bonds define no plane (one bond, or a linear atom).
 */
export function piAxis(x: Float64Array, atom: number, neighbors: readonly number[]): Vector | null {
  const units = neighbors.map((neighbor) => unitVector(x, atom, neighbor));
  if (units.length === 2) return normalized(cross(units[0], units[1]));
  if (units.length !== 3) return null;
  const [u, v, w] = units;
  return normalized(cross(minus(v, u), minus(w, u)));
}

/**
 * Twist from planarity about the bond j-k in degrees, 0 (π axes parallel) to 90: the angle between the two axes seen
 * along the bond, without regard to their signs. Null where an axis lies along the bond.
 */
export function twistAbout(
  x: Float64Array,
  j: number,
  k: number,
  axisJ: Vector,
  axisK: Vector,
): number | null {
  const along = unitVector(x, j, k);
  const seenJ = normalized(across(axisJ, along));
  const seenK = normalized(across(axisK, along));
  if (!seenJ || !seenK) return null;
  const cosine = Math.abs(dot(seenJ, seenK));
  return toDegrees(Math.atan2(length(cross(seenJ, seenK)), cosine));
}

/** The share of full π overlap that is left at a twist: cos²(twist). */
export function overlapAt(twist: number): number {
  return Math.cos(toRadians(twist)) ** 2;
}

function unitVector(x: Float64Array, from: number, to: number): Vector {
  const bond: Vector = [
    x[3 * to] - x[3 * from],
    x[3 * to + 1] - x[3 * from + 1],
    x[3 * to + 2] - x[3 * from + 2],
  ];
  return scaled(bond, 1 / length(bond));
}

/** The part of a vector at right angles to a unit vector. */
function across(vector: Vector, unit: Vector): Vector {
  return minus(vector, scaled(unit, dot(vector, unit)));
}

function normalized(vector: Vector): Vector | null {
  const size = length(vector);
  return size < LINEAR_SINE ? null : scaled(vector, 1 / size);
}

function scaled(vector: Vector, factor: number): Vector {
  return [vector[0] * factor, vector[1] * factor, vector[2] * factor];
}

function minus(left: Vector, right: Vector): Vector {
  return [left[0] - right[0], left[1] - right[1], left[2] - right[2]];
}

function dot(left: Vector, right: Vector): number {
  return left[0] * right[0] + left[1] * right[1] + left[2] * right[2];
}

function cross(left: Vector, right: Vector): Vector {
  return [
    left[1] * right[2] - left[2] * right[1],
    left[2] * right[0] - left[0] * right[2],
    left[0] * right[1] - left[1] * right[0],
  ];
}

function length(vector: Vector): number {
  return Math.hypot(vector[0], vector[1], vector[2]);
}
