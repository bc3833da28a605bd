/**
 * The Newman projection of a bond, from a geometry (Å): seen from the front atom along the bond, angles clockwise from
 * the front substituent of the torsion, which stands at the top. The rear substituent of the torsion then stands at the
 * torsion angle itself (IUPAC, Pure Appl. Chem. 1996, 68, 2193: positive where the turn is clockwise, front to rear).
 */
import { toDegrees, wrapDegrees } from '$lib/engine/light';

/** A substituent of the front or the rear atom as it is seen along the bond. */
export interface Spoke {
  readonly atom: number;
  /** Degrees clockwise from the top, (-180, 180]. */
  readonly azimuth: number;
  /** Length of its bond across the line of sight, Å; near zero for one that goes straight on. */
  readonly length: number;
  /** Whether it is one of the torsion's own two. */
  readonly own: boolean;
}

export interface NewmanView {
  readonly front: readonly Spoke[];
  readonly rear: readonly Spoke[];
}

type Vector = readonly [number, number, number];

const dot = (a: Vector, b: Vector): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: Vector, b: Vector): Vector => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
const scaled = (a: Vector, factor: number): Vector => [a[0] * factor, a[1] * factor, a[2] * factor];
const between = (x: ArrayLike<number>, from: number, to: number): Vector => [
  x[3 * to] - x[3 * from],
  x[3 * to + 1] - x[3 * from + 1],
  x[3 * to + 2] - x[3 * from + 2],
];
const unit = (a: Vector): Vector => scaled(a, 1 / Math.hypot(...a));

/** Projects the substituents of a torsion's two middle atoms; `neighbors` lists the atoms bonded to each atom. */
export function newmanView(
  x: ArrayLike<number>,
  [i, j, k, l]: readonly number[],
  neighbors: readonly (readonly number[])[],
): NewmanView {
  const sight = unit(between(x, j, k));
  const toFront = between(x, j, i);
  const along = dot(toFront, sight);
  const top = unit([
    toFront[0] - along * sight[0],
    toFront[1] - along * sight[1],
    toFront[2] - along * sight[2],
  ]);
  // Looking along the bond with the top upwards, right is their vector product.
  const right = cross(sight, top);
  const spokesOf = (center: number, other: number, ownAtom: number): Spoke[] =>
    neighbors[center]
      .filter((atom) => atom !== other)
      .map((atom) => {
        const bond = between(x, center, atom);
        const [across, up] = [dot(bond, right), dot(bond, top)];
        return {
          atom,
          azimuth: wrapDegrees(toDegrees(Math.atan2(across, up))),
          length: Math.hypot(across, up),
          own: atom === ownAtom,
        };
      });
  return { front: spokesOf(j, k, i), rear: spokesOf(k, j, l) };
}
