/** Vectors of three numbers, for code that runs once per molecule. */

export type Vector = readonly [number, number, number];

/** Position of an atom in a flat coordinate array. */
export function at(x: ArrayLike<number>, atom: number): Vector {
  return [x[3 * atom], x[3 * atom + 1], x[3 * atom + 2]];
}

export function add(a: Vector, b: Vector): Vector {
  return [a[0] + b[0], a[1] + b[1], a[2] + b[2]];
}

export function subtract(a: Vector, b: Vector): Vector {
  return [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
}

export function scale(a: Vector, factor: number): Vector {
  return [a[0] * factor, a[1] * factor, a[2] * factor];
}

export function dot(a: Vector, b: Vector): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

export function cross(a: Vector, b: Vector): Vector {
  return [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
}

export function norm(a: Vector): number {
  return Math.hypot(a[0], a[1], a[2]);
}

/** The vector at length 1; `otherwise` where it has no direction to speak of. */
export function unit(a: Vector, otherwise: Vector): Vector {
  const length = norm(a);
  return length < 1e-3 ? otherwise : scale(a, 1 / length);
}

/** Some unit vector at right angles to a unit vector. */
export function perpendicular(a: Vector): Vector {
  const other: Vector = Math.abs(a[0]) < 0.7 ? [1, 0, 0] : [0, 1, 0];
  return unit(cross(a, other), [0, 0, 1]);
}
