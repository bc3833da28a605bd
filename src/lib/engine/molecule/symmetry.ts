/** Symmetry of the labelled graph: which renumberings of its atoms leave a molecule what it is. */
import { createMolecule } from './build';
import { resolveConfiguration } from './configuration';
import type { Molecule, Stereocenter } from './molecule';
import { isPlainHydrogen } from './openchemlib';
import { isOddPermutation } from './parity';
import { isResonanceEquivalent } from './resonance';
import { symmetryClasses } from './symmetry-classes';

export { symmetryClasses } from './symmetry-classes';

/** A renumbering: atom n of one copy corresponds to atom `permutation[n]` of the other. */
export interface Automorphism {
  readonly permutation: Int32Array;
  /** Every stereocenter keeps its configuration: the two copies are compared as they are. */
  readonly preserves: boolean;
  /** Every stereocenter is inverted: one copy is compared with the mirror image of the other. */
  readonly inverts: boolean;
}

/** The automorphisms found, and whether these are all. */
export interface AutomorphismGroup {
  readonly automorphisms: readonly Automorphism[];
  readonly complete: boolean;
}

export interface AutomorphismOptions {
  /**
   * 'heavy': one renumbering for each different one of the heavy (and isotopic) atoms, hydrogens following theirs in
   * order; 'all': hydrogens are exchanged among themselves too.
   */
  readonly atoms: 'heavy' | 'all';
  /** Most renumberings returned. */
  readonly limit: number;
}

/** Assignments tried for each renumbering that may be returned, before a search that leads nowhere is given up. */
const STEPS_PER_RESULT = 400;
/** Renumberings looked at in search of one that inverts the molecule. */
const ACHIRALITY_LIMIT = 1000;

/**
 * The automorphisms of a molecule, the identity first: they keep elements, isotopes, bonds up to resonance (phenyl
 * flips, exchange of carboxylate oxygens, turns of CF3) and double-bond configuration, and keep or invert all
 * stereocenters. Without stereocenters every one of them both preserves and inverts.
 */
export function automorphisms(
  molecule: Molecule,
  { atoms, limit }: AutomorphismOptions,
): AutomorphismGroup {
  const found: Automorphism[] = [];
  const complete = searchAutomorphisms(molecule, atoms, limit, (automorphism) => {
    if (found.length === limit) return false;
    found.push(automorphism);
    return true;
  });
  return { automorphisms: found, complete };
}

/**
 * True when the labelled graph equals its mirror image: no stereocenters, or meso. Mirror images of a conformer are
 * then shapes of the same molecule.
 */
export function isAchiral(molecule: Molecule): boolean {
  if (molecule.stereocenters.length === 0) return true;
  let inverted = false;
  const complete = searchAutomorphisms(molecule, 'heavy', ACHIRALITY_LIMIT, ({ inverts }) => {
    inverted = inverts;
    return !inverts;
  });
  if (inverted || complete) return inverted;
  // Too symmetric to try everything: the canonical names of the two mirror images decide.
  const centers = molecule.stereocenters;
  const mirrored = centers.map((center) => ({ ...center, clockwise: !center.clockwise }));
  const nameOf = (configuration: readonly Stereocenter[]): string =>
    resolveConfiguration(createMolecule(molecule), configuration, molecule.stereobonds).smiles;
  return nameOf(centers) === nameOf(mirrored);
}

/**
 * Walks through all automorphisms until `visit` answers false; true when there are no more. Depth-first over the atoms
 * in the order of a walk through the graph, each tried on the atoms of its class next to its predecessor's image.
 */
function searchAutomorphisms(
  molecule: Molecule,
  scope: AutomorphismOptions['atoms'],
  limit: number,
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
  const extend = (depth: number): void => {
    if (depth === walk.length) {
      const automorphism = describe(molecule, withHydrogens(molecule, classes, image));
      if (automorphism && !visit(automorphism)) stopped = true;
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
      extend(depth + 1);
      taken[candidate] = 0;
      image[atom] = -1;
    }
  };
  extend(0);
  return !stopped;
}

/** The atoms to be mapped, each after a neighbor of it where there is one. */
function walkAtoms(
  molecule: Molecule,
  scope: AutomorphismOptions['atoms'],
): { atom: number; from: number }[] {
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

/** What a renumbering does to bonds and configuration; null when it is no automorphism after all. */
function describe(molecule: Molecule, permutation: Int32Array): Automorphism | null {
  if (!isResonanceEquivalent(molecule, permutation)) return null;
  if (!keepsDoubleBonds(molecule, permutation)) return null;
  const centers = new Map(molecule.stereocenters.map((center) => [center.atom, center]));
  let preserves = true;
  let inverts = true;
  for (const center of molecule.stereocenters) {
    const image = centers.get(permutation[center.atom]);
    if (!image) return null;
    const places = center.neighbors.map((atom) =>
      image.neighbors.indexOf(atom < 0 ? -1 : permutation[atom]),
    );
    const same = (center.clockwise === image.clockwise) !== isOddPermutation(places);
    if (same) inverts = false;
    else preserves = false;
  }
  return preserves || inverts ? { permutation, preserves, inverts } : null;
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
