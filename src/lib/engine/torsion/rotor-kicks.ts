/** Other positions of the rotors that a scan does not drive: which of them is best changes along the scan. */
import { findDrives, setTorsion } from '../conformers/drives';
import { findInversions, invert } from '../conformers/inversions';
import { rotateAbout, torsion } from '../geometry';
import type { Molecule } from '../molecule/molecule';
import { movedAtoms } from '../molecule/rotatable';
import { turnBetween } from '../units';
import type { TorsionAtoms } from './scan-symmetry';

/**
 * Rotors this many bonds from a driven bond are kicked, the nearest first: what lies farther off hardly feels the scan, and
 * the starts have it right already.
 */
const FARTHEST_ROTOR = 2;
const MOST_ROTORS = 6;
/** Symmetric tops this near are also turned two at a time. */
const FARTHEST_PAIRED_TOP = 1;
const MOST_PAIRED_TOPS = 4;
/** Half the period of a symmetric top, degrees. */
const TOP_TURN = 60;
/** A choice nearer than this to where a rotor already is, is no other position; degrees. */
const SAME_POSITION = 35;

interface Top {
  readonly j: number;
  readonly k: number;
  readonly atoms: Int32Array;
}

/** Creates the function that makes the kicked copies of a geometry (Å, 3N). */
export function createRotorKicks(
  molecule: Molecule,
  classes: Readonly<Int32Array>,
  torsions: readonly TorsionAtoms[],
): (x: Float64Array) => Float64Array[] {
  const distances = bondsAway(molecule, torsions);
  const isDriven = (j: number, k: number): boolean =>
    torsions.some(([, a, b]) => (a === j && b === k) || (a === k && b === j));
  const nearness = (j: number, k: number): number => Math.min(distances[j], distances[k]);
  const drives = findDrives(molecule, classes)
    .filter(({ atoms: [, j, k] }) => !isDriven(j, k) && nearness(j, k) <= FARTHEST_ROTOR)
    .sort((a, b) => nearness(a.atoms[1], a.atoms[2]) - nearness(b.atoms[1], b.atoms[2]))
    .slice(0, MOST_ROTORS);
  const tops = findTops(molecule, classes)
    .filter(({ j, k }) => !isDriven(j, k) && nearness(j, k) <= FARTHEST_ROTOR)
    .sort((a, b) => nearness(a.j, a.k) - nearness(b.j, b.k))
    .slice(0, MOST_ROTORS);
  const paired = tops
    .filter(({ j, k }) => nearness(j, k) <= FARTHEST_PAIRED_TOP)
    .slice(0, MOST_PAIRED_TOPS);

  const inversions = findInversions(molecule, classes).filter(
    ({ nitrogen }) => distances[nitrogen] <= FARTHEST_ROTOR,
  );
  const swaps = torsions.flatMap(([i, j, k, l]) => [
    ...invertibleTwins(molecule, classes, i, j),
    ...invertibleTwins(molecule, classes, l, k),
  ]);

  return (x) => {
    const kicked: Float64Array[] = [];
    for (const inversion of inversions) {
      const copy = x.slice();
      invert(copy, inversion);
      kicked.push(copy);
    }
    for (const [a, b] of swaps) kicked.push(withSwapped(x, a, b));
    for (const drive of drives) {
      const [i, j, k, l] = drive.atoms;
      const now = torsion(x, i, j, k, l);
      for (const angle of drive.angles) {
        if (Math.abs(turnBetween(now, angle)) < SAME_POSITION) continue;
        const copy = x.slice();
        setTorsion(copy, drive, angle);
        kicked.push(copy);
      }
    }
    for (const top of tops) kicked.push(turned(x, top));
    paired.forEach((top, n) => {
      for (const other of paired.slice(n + 1)) kicked.push(turned(turned(x, top), other));
    });
    return kicked;
  };
}

function turned(x: Float64Array, { j, k, atoms }: Top): Float64Array {
  const copy = x.slice();
  rotateAbout(copy, atoms, j, k, TOP_TURN);
  return copy;
}

/** The hydrogen beside a torsion's end hydrogen on an amine: where the amine inverts, the two change places. */
function invertibleTwins(
  molecule: Molecule,
  classes: Readonly<Int32Array>,
  end: number,
  center: number,
): [number, number][] {
  const isAmine = molecule.atomicNumbers[center] === 7 && molecule.neighbors[center].length === 3;
  if (!isAmine || molecule.neighbors[end].length > 1) return [];
  return molecule.neighbors[center]
    .filter(({ atom }) => atom !== end && classes[atom] === classes[end])
    .map(({ atom }) => [end, atom]);
}

function withSwapped(x: Float64Array, a: number, b: number): Float64Array {
  const copy = x.slice();
  copy.set(x.subarray(3 * a, 3 * a + 3), 3 * b);
  copy.set(x.subarray(3 * b, 3 * b + 3), 3 * a);
  return copy;
}

/** Ends of single bonds that bear three alike groups: methyl, trifluoromethyl, tert-butyl, ammonium. */
function findTops(molecule: Molecule, classes: Readonly<Int32Array>): Top[] {
  const tops: Top[] = [];
  molecule.bonds.forEach(({ a, b, order }, bond) => {
    if (order !== 1 || molecule.ringBonds[bond] === 1) return;
    for (const [j, k] of [
      [a, b],
      [b, a],
    ]) {
      const others = molecule.neighbors[k].map(({ atom }) => atom).filter((atom) => atom !== j);
      const alike = others.every((other) => classes[other] === classes[others[0]]);
      const isEnd = molecule.neighbors[j].length === 1;
      if (others.length === 3 && alike && !isEnd) {
        tops.push({ j, k, atoms: movedAtoms(molecule, j, k) });
      }
    }
  });
  return tops;
}

/** Number of bonds from the driven bonds to each atom. */
function bondsAway(molecule: Molecule, torsions: readonly TorsionAtoms[]): number[] {
  const away = new Array<number>(molecule.atomCount).fill(Infinity);
  const queue = torsions.flatMap(([, j, k]) => [j, k]);
  for (const atom of queue) away[atom] = 0;
  for (const atom of queue) {
    for (const neighbor of molecule.neighbors[atom]) {
      if (away[neighbor.atom] < Infinity) continue;
      away[neighbor.atom] = away[atom] + 1;
      queue.push(neighbor.atom);
    }
  }
  return away;
}
