/** Moves that pucker rings: part of a ring, with all it bears, turns about the line between two ring atoms. */
import { rotateAbout } from '../geometry';
import type { Molecule } from '../molecule/molecule';
import { toDegrees } from '../units';
import { atomShapes, flatRings } from './ideal-geometry';

/** A part of a ring that can be flapped over: one atom's corner, a longer arc, or a bridge. */
export interface RingMove {
  /** The ring atoms whose joining line is the axis. */
  readonly axis: readonly [number, number];
  /** The arc's own ring atoms. */
  readonly arc: readonly number[];
  /** The rest of the ring, without the axis. */
  readonly rest: readonly number[];
  /** The arc and all it bears. */
  readonly moving: Int32Array;
}

/** Corner and edge flaps (Goto and Osawa, J. Am. Chem. Soc. 1989, 111, 8950) and longer crankshafts of all flexible rings. */
export function findRingMoves(molecule: Molecule): RingMove[] {
  const flat = flatRings(molecule, atomShapes(molecule));
  const isStiff = (a: number, b: number): boolean => {
    const { bond } = molecule.neighbors[a].find(({ atom }) => atom === b)!;
    return (
      molecule.bonds[bond].order > 1 || flat.some((ring) => ring.includes(a) && ring.includes(b))
    );
  };
  const moves = new Map<string, RingMove>();
  for (const ring of molecule.rings) {
    if (ring.length < 4 || flat.includes(ring)) continue;
    const at = (place: number): number => ring[(place + ring.length) % ring.length];
    for (let length = 1; length <= ring.length / 2 - 1 || length === 1; length++) {
      for (let start = 0; start < ring.length; start++) {
        const [a, b] = [at(start), at(start + length + 1)];
        const hinges = [
          [at(start - 1), a],
          [a, at(start + 1)],
          [at(start + length), b],
          [b, at(start + length + 2)],
        ];
        if (hinges.some(([from, to]) => isStiff(from, to))) continue;
        const arc = Array.from({ length }, (_, n) => at(start + 1 + n));
        const rest = ring.filter((atom) => atom !== a && atom !== b && !arc.includes(atom));
        const moving = separate(molecule, [a, b], arc, rest);
        if (!moving) continue;
        const key = [Math.min(a, b), Math.max(a, b), Math.min(...arc)].join();
        if (!moves.has(key)) moves.set(key, { axis: [a, b], arc, rest, moving });
      }
    }
  }
  return [...moves.values()];
}

/** The atoms joined to `arc` when the axis atoms are taken out; null when `rest` is among them. */
function separate(
  molecule: Molecule,
  axis: readonly [number, number],
  arc: readonly number[],
  rest: readonly number[],
): Int32Array | null {
  const seen = new Set([...axis, ...arc]);
  const moving = [...arc];
  for (const atom of moving) {
    for (const { atom: next } of molecule.neighbors[atom]) {
      if (seen.has(next)) continue;
      if (rest.includes(next)) return null;
      seen.add(next);
      moving.push(next);
    }
  }
  return Int32Array.from(moving);
}

/** How far the arc stands out of the plane through the axis and the rest of the ring, degrees, signed. */
function elevation(x: Float64Array, { axis, arc, rest }: RingMove): number {
  const [a, b] = axis;
  const direction = [0, 1, 2].map((d) => x[3 * b + d] - x[3 * a + d]);
  const length = Math.hypot(...direction);
  const unit = direction.map((value) => value / length);
  const across = (atoms: readonly number[]): number[] => {
    const offset = [0, 1, 2].map(
      (d) => atoms.reduce((sum, atom) => sum + x[3 * atom + d], 0) / atoms.length - x[3 * a + d],
    );
    const along = offset[0] * unit[0] + offset[1] * unit[1] + offset[2] * unit[2];
    return offset.map((value, d) => value - along * unit[d]);
  };
  const outward = across(rest).map((value) => -value);
  const arm = across(arc);
  const cross = [
    outward[1] * arm[2] - outward[2] * arm[1],
    outward[2] * arm[0] - outward[0] * arm[2],
    outward[0] * arm[1] - outward[1] * arm[0],
  ];
  const sine = cross[0] * unit[0] + cross[1] * unit[1] + cross[2] * unit[2];
  const cosine = outward[0] * arm[0] + outward[1] * arm[1] + outward[2] * arm[2];
  return toDegrees(Math.atan2(sine, cosine));
}

/** An arc nearly in the plane goes to this elevation instead of to its mirror image, degrees. */
const LEAST_ELEVATION = 30;

/** Flaps the arc to the other side of the ring's plane, in place. */
export function flap(x: Float64Array, move: RingMove): void {
  const now = elevation(x, move);
  const target = Math.abs(now) < LEAST_ELEVATION / 2 ? (now < 0 ? 1 : -1) * LEAST_ELEVATION : -now;
  turnArc(x, move, target - now);
}

/** Turns the arc about its axis by an angle in degrees, in place. */
export function turnArc(x: Float64Array, move: RingMove, degrees: number): void {
  rotateAbout(x, move.moving, move.axis[0], move.axis[1], degrees);
}
