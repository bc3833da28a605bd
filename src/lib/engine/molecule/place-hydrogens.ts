/** Puts hydrogens where they belong in a 3-D geometry that lacks them; they are relaxed later. */
import { toRadians } from '../units';
import type { Molecule } from './molecule';
import { hasLonePair, isLinear, isPi, linkageOf } from './pi-systems';
import * as vector from './vector';
import type { Vector } from './vector';

/** Lengths of bonds to hydrogen, Å, rounded means (Allen et al., J. Chem. Soc. Perkin Trans. 2 1987, S1; B, Si, P, S, Se: common values). */
const BOND_LENGTHS: Readonly<Record<number, number>> = {
  5: 1.19,
  6: 1.09,
  7: 1.01,
  8: 0.97,
  14: 1.48,
  15: 1.42,
  16: 1.34,
  34: 1.46,
};
const OTHER_LENGTH = 1.5;
const TETRAHEDRAL = toRadians(109.47);

/**
 * Coordinates of all atoms (Å, 3N) from those of the atoms given: added hydrogens stand tetrahedral, planar or linear
 * as their atom's bonding asks, staggered, and where there is a choice as far from other atoms as they can.
 */
export function placeHydrogens(molecule: Molecule, given: ArrayLike<number>): Float64Array {
  const x = new Float64Array(3 * molecule.atomCount);
  for (let n = 0; n < given.length; n++) x[n] = given[n];
  const placed = Array.from({ length: molecule.givenAtomCount }, (_, atom) => atom);
  for (let atom = 0; atom < molecule.givenAtomCount; atom++) {
    const around = molecule.neighbors[atom].map((neighbor) => neighbor.atom);
    const missing = around.filter((other) => other >= molecule.givenAtomCount);
    if (missing.length === 0) continue;
    const known = around.filter((other) => other < molecule.givenAtomCount);
    const length = BOND_LENGTHS[molecule.atomicNumbers[atom]] ?? OTHER_LENGTH;
    const choices = directions(molecule, x, atom, known, missing.length);
    const best = roomiest(x, atom, placed, choices, length);
    missing.forEach((hydrogen, n) => {
      const place = vector.add(vector.at(x, atom), vector.scale(best[n], length));
      place.forEach((value, axis) => (x[3 * hydrogen + axis] = value));
      placed.push(hydrogen);
    });
  }
  return x;
}

/** Unit vectors for the missing hydrogens; several sets where the bonding leaves a choice. */
function directions(
  molecule: Molecule,
  x: Float64Array,
  atom: number,
  known: readonly number[],
  count: number,
): Vector[][] {
  const center = vector.at(x, atom);
  const bonds = known.map((other) =>
    vector.unit(vector.subtract(vector.at(x, other), center), [0, 0, 1]),
  );
  const flat = isFlat(molecule, atom);
  if (bonds.length === 0) return [aroundNothing(flat, count)];
  if (bonds.length === 1) {
    if (isLinear(molecule, atom)) return [[vector.scale(bonds[0], -1)]];
    return aroundOneBond(molecule, x, atom, known[0], bonds[0], flat, count);
  }
  const sum = bonds.reduce(vector.add);
  const normal = vector.unit(vector.cross(bonds[0], bonds[1]), vector.perpendicular(bonds[0]));
  const away = vector.unit(vector.scale(sum, -1), normal);
  if (bonds.length > 2 || (flat && count === 1)) return [[away]];
  const tilt = TETRAHEDRAL / 2;
  const sides = [1, -1].map((side) =>
    vector.add(vector.scale(away, Math.cos(tilt)), vector.scale(normal, side * Math.sin(tilt))),
  );
  return count === 1 ? sides.map((side) => [side]) : [sides];
}

/** Trigonal centers, amide-like nitrogen included. */
function isFlat(molecule: Molecule, atom: number): boolean {
  if (isPi(molecule, atom)) return true;
  return (
    molecule.atomicNumbers[atom] === 7 &&
    hasLonePair(molecule, atom) &&
    molecule.neighbors[atom].some((neighbor) => isPi(molecule, neighbor.atom))
  );
}

function aroundNothing(flat: boolean, count: number): Vector[] {
  const third = Math.sqrt(3) / 2;
  const corner = 1 / Math.sqrt(3);
  const corners: Vector[] = flat
    ? [
        [1, 0, 0],
        [-0.5, third, 0],
        [-0.5, -third, 0],
      ]
    : [
        [corner, corner, corner],
        [corner, -corner, -corner],
        [-corner, corner, -corner],
        [-corner, -corner, corner],
      ];
  return Array.from({ length: count }, (_, n) => corners[n % corners.length]);
}

/** Sets of directions on a cone about one bond, staggered or in the plane of the neighbor's bonds. */
function aroundOneBond(
  molecule: Molecule,
  x: Float64Array,
  atom: number,
  neighbor: number,
  bond: Vector,
  flat: boolean,
  count: number,
): Vector[][] {
  const others = molecule.neighbors[neighbor].filter(
    (other) => other.atom !== atom && other.atom < molecule.givenAtomCount,
  );
  // An acid's hydrogen lies on the side of its C=O; elsewhere any other neighbor serves as the mark.
  const acid = linkageOf(molecule, atom, neighbor) === 'carboxylic-acid';
  const mark =
    others.find((other) => acid && molecule.bonds[other.bond].order === 2) ?? others.at(0);
  const raw = mark
    ? vector.subtract(vector.at(x, mark.atom), vector.at(x, neighbor))
    : vector.perpendicular(bond);
  const across = vector.unit(
    vector.subtract(raw, vector.scale(bond, vector.dot(raw, bond))),
    vector.perpendicular(bond),
  );
  const beside = vector.cross(bond, across);
  const angle = flat ? toRadians(120) : TETRAHEDRAL;
  const at = (torsion: number): Vector => {
    const turned = vector.add(
      vector.scale(across, Math.cos(toRadians(torsion))),
      vector.scale(beside, Math.sin(toRadians(torsion))),
    );
    return vector.add(vector.scale(bond, Math.cos(angle)), vector.scale(turned, Math.sin(angle)));
  };
  if (acid) return [[at(0)]];
  const planar = flat || isPi(molecule, neighbor);
  if (count > 2) return [[at(180), at(60), at(-60)]];
  if (count === 2)
    return flat
      ? [[at(180), at(0)]]
      : [
          [at(60), at(-60)],
          [at(180), at(60)],
          [at(180), at(-60)],
        ];
  return (planar ? [180, 0] : [180, 60, -60]).map((torsion) => [at(torsion)]);
}

/** The set whose hydrogens stay farthest from all atoms placed so far; the first of equals. */
function roomiest(
  x: Float64Array,
  atom: number,
  placed: readonly number[],
  choices: readonly Vector[][],
  length: number,
): Vector[] {
  const room = (set: readonly Vector[]): number => {
    let least = Infinity;
    for (const direction of set) {
      const place = vector.add(vector.at(x, atom), vector.scale(direction, length));
      for (const other of placed) {
        if (other === atom) continue;
        least = Math.min(least, vector.norm(vector.subtract(vector.at(x, other), place)));
      }
    }
    return least;
  };
  let best = choices[0];
  let most = room(best);
  for (const choice of choices.slice(1)) {
    const value = room(choice);
    // A difference in the last digit is no reason to prefer the mirror image.
    if (value <= most + 1e-6) continue;
    best = choice;
    most = value;
  }
  return best;
}
