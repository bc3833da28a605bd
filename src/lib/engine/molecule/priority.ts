/** Priorities of substituents, for a choice of reference atoms that does not depend on how the input is numbered. */
import type { Molecule } from './molecule';
import { symmetryClasses } from './symmetry-classes';

/** How many bonds outward two substituents are compared before their symmetry classes decide. */
const DEPTH = 12;

/** An order of all atoms. */
export interface Priorities {
  /** Negative when `a` comes first: higher element, heavier isotope, then the class of its surroundings. */
  compare(a: number, b: number): number;
}

/** Creates the order of a molecule's atoms; atoms that a symmetry exchanges are ordered by number. */
export function createPriorities(molecule: Molecule): Priorities {
  const classes = symmetryClasses(molecule);
  return {
    compare: (a, b) =>
      molecule.atomicNumbers[b] - molecule.atomicNumbers[a] ||
      molecule.massNumbers[b] - molecule.massNumbers[a] ||
      classes[b] - classes[a] ||
      a - b,
  };
}

/**
 * The neighbors of `center` other than `origin`, highest priority first: the atomic numbers at the substituent, then
 * sphere by sphere outward, in the manner of Cahn, Ingold and Prelog (Angew. Chem. Int. Ed. 1966, 5, 385) with each
 * sphere compared as a whole; multiple bonds count their atom once more per extra bond. Ties go by `priorities`.
 */
export function rankedSubstituents(
  molecule: Molecule,
  priorities: Priorities,
  center: number,
  origin: number,
): number[] {
  const ranked = molecule.neighbors[center]
    .filter(({ atom }) => atom !== origin)
    .map(({ atom }) => ({ atom, spheres: spheresOf(molecule, center, atom) }));
  ranked.sort((left, right) => {
    for (let depth = 0; depth < DEPTH; depth++) {
      const difference = compareSpheres(left.spheres[depth], right.spheres[depth]);
      if (difference !== 0) return difference;
    }
    return priorities.compare(left.atom, right.atom);
  });
  return ranked.map(({ atom }) => atom);
}

/** Higher elements first, then the larger sphere first. */
function compareSpheres(left: readonly number[] = [], right: readonly number[] = []): number {
  for (let n = 0; n < Math.max(left.length, right.length); n++) {
    const difference = (right[n] ?? 0) - (left[n] ?? 0);
    if (difference !== 0) return difference;
  }
  return 0;
}

/** Atomic numbers at rising distance from the substituent, each sphere sorted from high to low. */
function spheresOf(molecule: Molecule, center: number, start: number): number[][] {
  const seen = new Uint8Array(molecule.atomCount);
  seen[center] = seen[start] = 1;
  const spheres = [[molecule.atomicNumbers[start]]];
  let current = [start];
  while (current.length > 0 && spheres.length < DEPTH) {
    const sphere: number[] = [];
    const next: number[] = [];
    for (const atom of current) {
      for (const neighbor of molecule.neighbors[atom]) {
        const { order } = molecule.bonds[neighbor.bond];
        const count = (seen[neighbor.atom] ? 0 : 1) + order - 1;
        for (let n = 0; n < count; n++) sphere.push(molecule.atomicNumbers[neighbor.atom]);
        if (seen[neighbor.atom]) continue;
        seen[neighbor.atom] = 1;
        next.push(neighbor.atom);
      }
    }
    spheres.push(sphere.sort((a, b) => b - a));
    current = next;
  }
  return spheres;
}
