/**
 * Searches one symmetry of a molecule that sends given atoms to given atoms and can be reached by turning bonds (and,
 * for a mirror, reflecting): a permutation of the atoms that keeps neighbors, classes and configuration.
 */
import type { Molecule } from '../molecule/molecule';
import type { Handedness, RigidCenter } from './handedness';

export interface SymmetryQuestion {
  readonly molecule: Molecule;
  /** Symmetry class of each atom. */
  readonly classes: Readonly<Int32Array>;
  /** The configuration of the geometry to be transformed. */
  readonly handedness: Handedness;
  /** The configuration it must have afterwards; the same unless given. */
  readonly wanted?: Handedness;
}

/** Assignments tried before the search gives up: symmetry that is so hard to see is not worth the time. */
const MOST_TRIALS = 5000;

/**
 * Returns `source`, where atom a of the transformed geometry takes the place of atom source[a], with source[from] = to
 * for each anchor and the whole reflected when `mirror`; null where there is none.
 */
export function findAutomorphism(
  question: SymmetryQuestion,
  anchors: readonly (readonly [from: number, to: number])[],
  mirror: boolean,
): Int32Array | null {
  const { molecule, classes } = question;
  const source = new Int32Array(molecule.atomCount).fill(-1);
  const taken = new Uint8Array(molecule.atomCount);
  const allowed = createConfigurationCheck(question, source, mirror);
  let trials = 0;

  const assign = (atom: number, image: number): boolean => {
    if (taken[image] === 1 || classes[atom] !== classes[image]) return false;
    const fits = molecule.neighbors[atom].every(
      (neighbor) =>
        source[neighbor.atom] === -1 ||
        molecule.neighbors[image].some((other) => other.atom === source[neighbor.atom]),
    );
    if (!fits) return false;
    source[atom] = image;
    taken[image] = 1;
    if (allowed(atom)) return true;
    release(atom);
    return false;
  };
  const release = (atom: number): void => {
    taken[source[atom]] = 0;
    source[atom] = -1;
  };

  for (const [from, to] of anchors) {
    if (source[from] === to) continue;
    if (source[from] !== -1 || !assign(from, to)) return null;
  }
  const order = walkingOrder(molecule, anchors[0][0]).filter(({ atom }) => source[atom] === -1);
  const place = (position: number): boolean => {
    if (position === order.length) return true;
    const { atom, from } = order[position];
    const images = molecule.neighbors[source[from]].map((neighbor) => neighbor.atom);
    // An atom that may stay where it is, stays.
    for (const image of images.includes(atom) ? [atom, ...images] : images) {
      if (++trials > MOST_TRIALS) return false;
      if (!assign(atom, image)) continue;
      if (place(position + 1)) return true;
      release(atom);
    }
    return false;
  };
  return place(0) ? source : null;
}

/** Atoms breadth first, each with a neighbor that comes before it; end atoms last, so that the skeleton decides. */
function walkingOrder(molecule: Molecule, root: number): { atom: number; from: number }[] {
  const seen = new Uint8Array(molecule.atomCount);
  const inner: { atom: number; from: number }[] = [];
  const ends: { atom: number; from: number }[] = [];
  const queue = [root];
  seen[root] = 1;
  for (const from of queue) {
    for (const { atom } of molecule.neighbors[from]) {
      if (seen[atom] === 1) continue;
      seen[atom] = 1;
      queue.push(atom);
      (molecule.neighbors[atom].length > 1 ? inner : ends).push({ atom, from });
    }
  }
  return [...inner, ...ends];
}

/** Creates the test, after each assignment, that no rigid center and no double bond near the atom changed. */
function createConfigurationCheck(
  { molecule, classes, handedness, wanted = handedness }: SymmetryQuestion,
  source: Int32Array,
  mirror: boolean,
): (atom: number) => boolean {
  const side = mirror ? -1 : 1;
  const isEnd = (atom: number): boolean => molecule.neighbors[atom].length === 1;

  /** Images of a center's neighbors; open ends are filled in where only one choice is left, else null. */
  const imagesOf = (center: RigidCenter): number[] | null => {
    const open = center.neighbors.filter((neighbor) => source[neighbor] === -1);
    if (open.some((neighbor) => !isEnd(neighbor))) return null;
    if (new Set(open.map((neighbor) => classes[neighbor])).size < open.length) return null;
    const free = molecule.neighbors[source[center.atom]]
      .map((neighbor) => neighbor.atom)
      .filter((atom) => !center.neighbors.some((neighbor) => source[neighbor] === atom));
    return center.neighbors.map((neighbor) =>
      source[neighbor] === -1
        ? (free.find((atom) => classes[atom] === classes[neighbor]) ?? -1)
        : source[neighbor],
    );
  };
  const centerKept = (atom: number): boolean => {
    const center = wanted.centers[atom];
    if (!center || source[atom] === -1) return true;
    const images = imagesOf(center);
    const target = handedness.centers[source[atom]];
    if (!images) return true;
    if (!target) return false;
    return center.sign === side * target.sign * parity(images, target.neighbors);
  };
  const bondsKept = (atom: number): boolean =>
    wanted.bonds.every(({ atoms, cis }) => {
      if (!atoms.includes(atom) || atoms.some((member) => source[member] === -1)) return true;
      const [a, b, c, d] = atoms.map((member) => source[member]);
      return handedness.bonds.some(
        (other) => other.cis === cis && sameEitherWay(other.atoms, [a, b, c, d]),
      );
    });
  return (atom) =>
    centerKept(atom) &&
    molecule.neighbors[atom].every((neighbor) => centerKept(neighbor.atom)) &&
    bondsKept(atom);
}

/** Whether two torsions are the same one, read from either end. */
export function sameEitherWay(one: ArrayLike<number>, other: ArrayLike<number>): boolean {
  const forward = [0, 1, 2, 3].every((n) => one[n] === other[n]);
  return forward || [0, 1, 2, 3].every((n) => one[n] === other[3 - n]);
}

/** +1 when `images` is an even permutation of `reference`, -1 when odd, 0 when it is none. */
function parity(images: readonly number[], reference: readonly number[]): number {
  const positions = images.map((image) => reference.indexOf(image));
  let sign = positions.includes(-1) ? 0 : 1;
  for (let a = 0; a < positions.length; a++) {
    for (let b = 0; b < a; b++) {
      if (positions[b] > positions[a]) sign = -sign;
    }
  }
  return sign;
}
