/** The bonds a conformer search turns about, and the torsions it tries there. */
import { rotateAbout, torsion } from '../geometry';
import type { Molecule } from '../molecule/molecule';
import { torsionChoices } from './torsion-choices';
import type { AtomShape } from './ideal-geometry';
import { atomShapes, flatRings } from './ideal-geometry';

/** One bond, or one linear chain such as an alkyne's, about which one side of the molecule is turned. */
export interface Drive {
  /** The torsion i-j-k-l that stands for the turn. */
  readonly atoms: readonly [number, number, number, number];
  /** The atoms that turn, on the side of l. */
  readonly moving: Int32Array;
  /** Torsions worth starting from, degrees; turns that a symmetric end makes equal are left out. */
  readonly angles: readonly number[];
}

/** Sets a drive's torsion, degrees, turning its moving side. */
export function setTorsion(x: Float64Array, drive: Drive, target: number): void {
  const [i, j, k, l] = drive.atoms;
  rotateAbout(x, drive.moving, j, k, target - torsion(x, i, j, k, l));
}

/**
 * Finds every acyclic single bond whose turn makes a different conformer: conjugated bonds, amides, esters, hydroxyl,
 * thiol and amino ends included; methyl and its like, whose turn changes nothing, left out. `classes` are the symmetry
 * classes of the atoms.
 */
export function findDrives(molecule: Molecule, classes: ArrayLike<number>): Drive[] {
  const shapes = atomShapes(molecule);
  const flat = flatRings(molecule, shapes);
  const usedRings = new Set<readonly number[]>();
  const drives: Drive[] = [];
  for (const [j, k] of findAxes(molecule, shapes)) {
    const ends = [describeEnd(molecule, classes, j, k), describeEnd(molecule, classes, k, j)];
    if (ends.some(({ others, isTop }) => others.length === 0 || isTop)) continue;
    const fold = takeFold(shapes, flat, usedRings, ends);
    const angles = torsionChoices(molecule, shapes, flat, j, k).filter((a) => a < 360 / fold);
    if (angles.length < 2) continue;
    drives.push(orient(molecule, ends, angles));
  }
  return drives;
}

/** Pairs of atoms at the ends of a turnable axis: neighbors, or the ends of a chain of linear atoms. */
function findAxes(molecule: Molecule, shapes: readonly AtomShape[]): [number, number][] {
  const axes: [number, number][] = [];
  for (let start = 0; start < molecule.atomCount; start++) {
    if (shapes[start] === 'linear') continue;
    for (const first of molecule.neighbors[start]) {
      let previous = start;
      let { atom } = first;
      let turns = isTurnable(molecule, first.bond);
      while (turns && shapes[atom] === 'linear') {
        const before = previous;
        const next = molecule.neighbors[atom].find((neighbor) => neighbor.atom !== before);
        if (!next || molecule.bonds[next.bond].order === 2) break;
        turns = !molecule.ringBonds[next.bond];
        previous = atom;
        ({ atom } = next);
      }
      if (turns && start < atom && shapes[atom] !== 'linear') axes.push([start, atom]);
    }
  }
  return axes;
}

function isTurnable(molecule: Molecule, bond: number): boolean {
  if (molecule.ringBonds[bond]) return false;
  const { a, b, order } = molecule.bonds[bond];
  if (order !== 2) return order === 1;
  // The double bond of an amidinium or guanidinium ion is as much a single one as its neighbors.
  const isSpread = (nitrogen: number, carbon: number): boolean =>
    molecule.formalCharges[nitrogen] === 1 &&
    molecule.atomicNumbers[nitrogen] === 7 &&
    molecule.atomicNumbers[carbon] === 6 &&
    molecule.neighbors[carbon].some(
      ({ atom }) =>
        atom !== nitrogen &&
        molecule.atomicNumbers[atom] === 7 &&
        molecule.neighbors[atom].length === 3,
    );
  const isStereobond = molecule.stereobonds.some((stereobond) => stereobond.bond === bond);
  return !isStereobond && (isSpread(a, b) || isSpread(b, a));
}

interface End {
  readonly atom: number;
  /** Its neighbors that are not on the axis, the heaviest first. */
  readonly others: readonly number[];
  /** All of them alike. */
  readonly alike: boolean;
  /** A methyl, a trifluoromethyl, an ammonium: three equal terminal atoms, or a tert-butyl. */
  readonly isTop: boolean;
}

function describeEnd(
  molecule: Molecule,
  classes: ArrayLike<number>,
  atom: number,
  far: number,
): End {
  const axisSide = stepTowards(molecule, atom, far);
  const others = molecule.neighbors[atom]
    .map((neighbor) => neighbor.atom)
    .filter((other) => other !== axisSide)
    .sort((a, b) => molecule.atomicNumbers[b] - molecule.atomicNumbers[a] || a - b);
  const alike = others.every((other) => classes[other] === classes[others[0]]);
  return { atom, others, alike, isTop: alike && others.length === 3 };
}

/** The neighbor of an atom that leads to `far`, which lies at the other end of a linear chain. */
function stepTowards(molecule: Molecule, atom: number, far: number): number {
  for (const { atom: first } of molecule.neighbors[atom]) {
    let previous = atom;
    let current = first;
    while (current !== far && molecule.neighbors[current].length === 2) {
      const before = previous;
      previous = current;
      current = molecule.neighbors[current].find((neighbor) => neighbor.atom !== before)!.atom;
      if (current === atom) break;
    }
    if (current === far) return first;
  }
  throw new Error(`no chain joins atoms ${atom} and ${far}`);
}

/**
 * 2 when an end is a plane with two equal sides, so that half the turns repeat the other half; a ring can do
 * that for one of the bonds it bears only, for its flip turns both.
 */
function takeFold(
  shapes: readonly AtomShape[],
  flat: readonly (readonly number[])[],
  usedRings: Set<readonly number[]>,
  ends: readonly End[],
): number {
  for (const { atom, others, alike } of ends) {
    if (!alike || others.length !== 2 || shapes[atom] !== 'planar') continue;
    const rings = flat.filter((ring) => ring.includes(atom));
    if (rings.some((ring) => usedRings.has(ring))) continue;
    if (rings.length > 1 || rings.some((ring) => !others.every((o) => ring.includes(o)))) continue;
    for (const ring of rings) usedRings.add(ring);
    return 2;
  }
  return 1;
}

/** Makes the smaller side the one that turns. */
function orient(molecule: Molecule, ends: readonly End[], angles: readonly number[]): Drive {
  const sides = ends.map(({ atom, others }) => collectSide(molecule, atom, others));
  const [still, turned] = sides[0].length < sides[1].length ? [1, 0] : [0, 1];
  return {
    atoms: [ends[still].others[0], ends[still].atom, ends[turned].atom, ends[turned].others[0]],
    moving: Int32Array.from(sides[turned]),
    angles,
  };
}

/** All atoms reached from `starts` without passing `root`. */
export function collectSide(molecule: Molecule, root: number, starts: readonly number[]): number[] {
  const seen = new Set([root, ...starts]);
  const side = [...starts];
  for (const atom of side) {
    for (const { atom: next } of molecule.neighbors[atom]) {
      if (seen.has(next)) continue;
      seen.add(next);
      side.push(next);
    }
  }
  return side;
}
