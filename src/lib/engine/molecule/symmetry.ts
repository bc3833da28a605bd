/** Symmetry of the labelled graph: which renumberings of its atoms leave a molecule what it is. */
import { createMolecule } from './build';
import { resolveConfiguration } from './configuration';
import { searchAutomorphisms, type Automorphism } from './automorphism-search';
import type { Molecule, Stereocenter } from './molecule';

export type { Automorphism } from './automorphism-search';
export { symmetryClasses } from './symmetry-classes';

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

/** Most renumberings looked at in search of one that inverts the molecule. */
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
  const either = { preserves: true, inverts: true };
  const complete = searchAutomorphisms(molecule, atoms, limit, either, (automorphism) => {
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
  const inverting = { preserves: false, inverts: true };
  const complete = searchAutomorphisms(molecule, 'heavy', ACHIRALITY_LIMIT, inverting, () => {
    inverted = true;
    return false;
  });
  if (inverted || complete) return inverted;
  // Too symmetric to try everything: the canonical names of the two mirror images decide.
  const centers = molecule.stereocenters;
  const mirrored = centers.map((center) => ({ ...center, clockwise: !center.clockwise }));
  const nameOf = (configuration: readonly Stereocenter[]): string =>
    resolveConfiguration(createMolecule(molecule), configuration, molecule.stereobonds).smiles;
  return nameOf(centers) === nameOf(mirrored);
}
