/** Searches the renumberings of a molecule's atoms that leave it what it is. */
import type { Molecule, Stereocenter } from './molecule';
import { isPlainHydrogen } from './openchemlib';
import { isOddPermutation } from './parity';
import { isResonanceEquivalent } from './resonance';
import { symmetryClasses } from './symmetry-classes';

/** A renumbering: atom n of one copy corresponds to atom `permutation[n]` of the other. */
export interface Automorphism {
  readonly permutation: Int32Array;
  /** Every stereocenter keeps its configuration: the two copies are compared as they are. */
  readonly preserves: boolean;
  /** Every stereocenter is inverted: one copy is compared with the mirror image of the other. */
  readonly inverts: boolean;
}

/** What a renumbering may do to the stereocenters. */
type Effect = Pick<Automorphism, 'preserves' | 'inverts'>;

/** Assignments tried for each renumbering that may be returned, before a search that leads nowhere is given up. */
const STEPS_PER_RESULT = 400;

/**
 * Walks through the automorphisms with at least one of the wanted effects until `visit` answers false; true when there
 * are no more. Depth-first over the atoms in the order of a walk through the graph, each tried on the atoms of its
 * class next to its predecessor's image; stereocenters are compared as soon as their neighbors are placed.
 */
export function searchAutomorphisms(
  molecule: Molecule,
  scope: 'heavy' | 'all',
  limit: number,
  wanted: Effect,
  visit: (automorphism: Automorphism) => boolean,
): boolean {
  const classes = symmetryClasses(molecule);
  const walk = walkAtoms(molecule, scope);
  const image = new Int32Array(molecule.atomCount).fill(-1);
  const taken = new Uint8Array(molecule.atomCount);
  const place = new Int32Array(molecule.atomCount).fill(-1);
  walk.forEach(({ atom }, n) => (place[atom] = n));
  const bonded = bondTable(molecule);
  const everyAtom = Array.from({ length: molecule.atomCount }, (_, atom) => atom);
  const centers = new Map(molecule.stereocenters.map((center) => [center.atom, center]));
  const settled = centersByDepth(molecule, place, walk.length);
  let steps = STEPS_PER_RESULT * (limit + 10) + 20 * molecule.atomCount;
  let stopped = false;

  const fits = (atom: number, candidate: number): boolean =>
    classes[atom] === classes[candidate] &&
    taken[candidate] === 0 &&
    place[candidate] >= 0 &&
    molecule.neighbors[atom].every(
      ({ atom: neighbor }) =>
        image[neighbor] < 0 || bonded[image[neighbor] * molecule.atomCount + candidate] === 1,
    );
  const finish = (effect: Effect): void => {
    const permutation = withHydrogens(molecule, classes, image);
    if (!isResonanceEquivalent(molecule, permutation)) return;
    if (!keepsDoubleBonds(molecule, permutation)) return;
    if (!visit({ permutation, ...effect })) stopped = true;
  };
  const extend = (depth: number, effect: Effect): void => {
    if (depth === walk.length) {
      finish(effect);
      return;
    }
    const { atom, from } = walk[depth];
    const around =
      from < 0 ? everyAtom : molecule.neighbors[image[from]].map((other) => other.atom);
    // The atom itself goes first, so that the identity is the first automorphism found.
    const candidates = around.includes(atom)
      ? [atom, ...around.filter((other) => other !== atom)]
      : around;
    for (const candidate of candidates) {
      if (stopped) return;
      if (!fits(atom, candidate)) continue;
      if (--steps < 0) {
        stopped = true;
        return;
      }
      image[atom] = candidate;
      taken[candidate] = 1;
      const next = narrowed(effect, settled[depth], centers, image);
      if (next.preserves || next.inverts) extend(depth + 1, next);
      taken[candidate] = 0;
      image[atom] = -1;
    }
  };
  extend(0, wanted);
  return !stopped;
}

/** The stereocenters whose last neighbor is placed at each depth of the walk. */
function centersByDepth(
  molecule: Molecule,
  place: ArrayLike<number>,
  depths: number,
): Stereocenter[][] {
  const lists: Stereocenter[][] = Array.from({ length: depths }, () => []);
  for (const center of molecule.stereocenters) {
    const places = [center.atom, ...center.neighbors].map((atom) => (atom < 0 ? -1 : place[atom]));
    lists[Math.max(...places)].push(center);
  }
  return lists;
}

/** What is left of an effect once these stereocenters have their images. */
function narrowed(
  effect: Effect,
  settled: readonly Stereocenter[],
  centers: ReadonlyMap<number, Stereocenter>,
  image: ArrayLike<number>,
): Effect {
  let { preserves, inverts } = effect;
  for (const center of settled) {
    const target = centers.get(image[center.atom]);
    if (!target) return { preserves: false, inverts: false };
    const places = center.neighbors.map((atom) =>
      atom < 0 ? 3 : image[atom] < 0 ? -1 : target.neighbors.indexOf(image[atom]),
    );
    // A hydrogen that is not walked takes the one place that is left; the four places add up to 6.
    const open = places.indexOf(-1);
    if (open >= 0) places[open] = 5 - places.reduce((sum, at) => sum + at, 0);
    const same = (center.clockwise === target.clockwise) !== isOddPermutation(places);
    if (same) inverts = false;
    else preserves = false;
  }
  return { preserves, inverts };
}

/** The atoms to be mapped, each after a neighbor of it where there is one. */
function walkAtoms(molecule: Molecule, scope: 'heavy' | 'all'): { atom: number; from: number }[] {
  const walk: { atom: number; from: number }[] = [];
  const seen = new Uint8Array(molecule.atomCount);
  for (let root = 0; root < molecule.atomCount; root++) {
    if (seen[root] || (scope === 'heavy' && isPlainHydrogen(molecule, root))) continue;
    seen[root] = 1;
    let next = walk.push({ atom: root, from: -1 }) - 1;
    for (; next < walk.length; next++) {
      for (const { atom } of molecule.neighbors[walk[next].atom]) {
        if (seen[atom] || (scope === 'heavy' && isPlainHydrogen(molecule, atom))) continue;
        seen[atom] = 1;
        walk.push({ atom, from: walk[next].atom });
      }
    }
  }
  return walk;
}

/** 1 at a × N + b where atoms a and b are bonded. */
function bondTable(molecule: Molecule): Uint8Array {
  const table = new Uint8Array(molecule.atomCount ** 2);
  for (const { a, b } of molecule.bonds) {
    table[a * molecule.atomCount + b] = table[b * molecule.atomCount + a] = 1;
  }
  return table;
}

/** A copy of the image in which plain hydrogens without one follow their heavy atoms, in order. */
function withHydrogens(molecule: Molecule, classes: Int32Array, image: Int32Array): Int32Array {
  const full = Int32Array.from(image);
  const hydrogensOf = (atom: number): number[] =>
    molecule.neighbors[atom]
      .map((neighbor) => neighbor.atom)
      .filter((neighbor) => image[neighbor] < 0)
      .sort((a, b) => classes[a] - classes[b] || a - b);
  for (let atom = 0; atom < molecule.atomCount; atom++) {
    if (image[atom] < 0) continue;
    const images = hydrogensOf(image[atom]);
    hydrogensOf(atom).forEach((hydrogen, n) => (full[hydrogen] = images[n]));
  }
  return full;
}

/** Whether every double bond with a configuration comes to lie on one with the same configuration. */
function keepsDoubleBonds(molecule: Molecule, permutation: Int32Array): boolean {
  return molecule.stereobonds.every(({ atoms, cis }) => {
    const [first, left, right, last] = atoms.map((atom) => permutation[atom]);
    return molecule.stereobonds.some((other) => {
      const [a, b, c, d] = other.atoms;
      if (b === left && c === right)
        return (cis === other.cis) === ((a === first) === (d === last));
      if (b === right && c === left)
        return (cis === other.cis) === ((a === last) === (d === first));
      return false;
    });
  });
}
