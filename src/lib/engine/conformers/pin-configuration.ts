/** Settles the configuration of what the input left open: a search must not mix the conformers of two stereoisomers. */
import type { InputWarningCode } from '../errors';
import { createMolecule } from '../molecule/build';
import type { Molecule, Stereobond, Stereocenter } from '../molecule/molecule';
import { handedness } from '../molecule/stereo';

/** The molecule with its undefined stereocentres as they are in a geometry (Å, 3N). */
export function pinCenters(molecule: Molecule, x: Float64Array): Molecule {
  const centers = openAtoms(molecule, 'undefined-stereocenter').flatMap((atom): Stereocenter[] => {
    const around = molecule.neighbors[atom].map((neighbor) => neighbor.atom);
    if (around.length < 3 || around.length > 4) return [];
    // An amine's pyramid is no configuration: it inverts, and its forms are conformers.
    if (molecule.atomicNumbers[atom] === 7 && around.length === 3) return [];
    const [a, b, c, d = -1] = around;
    const neighbors = [a, b, c, d] as const;
    return [{ atom, neighbors, clockwise: handedness(x, atom, neighbors) > 0 }];
  });
  if (centers.length === 0) return molecule;
  return createMolecule({
    ...molecule,
    stereocenters: [...molecule.stereocenters, ...centers],
  });
}

/**
 * The molecule with its undefined double bonds trans with respect to the heaviest neighbors, the form that is lower as
 * a rule; cis inside rings.
 */
export function pinDoubleBonds(molecule: Molecule): Molecule {
  const bonds = openAtoms(molecule, 'undefined-double-bond').flatMap((b) =>
    molecule.neighbors[b].flatMap(({ atom: c, bond }): Stereobond[] => {
      const isKnown = molecule.stereobonds.some((stereobond) => stereobond.bond === bond);
      if (molecule.bonds[bond].order !== 2 || isKnown) return [];
      const [a, d] = [chainNeighbor(molecule, b, c), chainNeighbor(molecule, c, b)];
      if (a === null || d === null) return [];
      return [{ bond, atoms: [a, b, c, d], cis: molecule.ringBonds[bond] === 1 }];
    }),
  );
  if (bonds.length === 0) return molecule;
  return createMolecule({ ...molecule, stereobonds: [...molecule.stereobonds, ...bonds] });
}

/** True when some stereocenter's configuration is not stated. */
export function hasOpenCenters(molecule: Molecule): boolean {
  return openAtoms(molecule, 'undefined-stereocenter').length > 0;
}

function openAtoms(molecule: Molecule, code: InputWarningCode): number[] {
  const atoms = molecule.warnings
    .filter((warning) => warning.code === code)
    .flatMap(({ atom }) => (atom === undefined ? [] : [atom]));
  return [...new Set(atoms)];
}

/** The neighbor of an atom that stands for its side of the double bond to `other`: in the same ring, or the heaviest. */
function chainNeighbor(molecule: Molecule, atom: number, other: number): number | null {
  const ring = molecule.rings.find((atoms) => atoms.includes(atom) && atoms.includes(other));
  const rank = (candidate: number): number =>
    1000 * Number(ring?.includes(candidate) ?? false) +
    10 * molecule.atomicNumbers[candidate] +
    molecule.neighbors[candidate].length;
  const candidates = molecule.neighbors[atom]
    .map((neighbor) => neighbor.atom)
    .filter((candidate) => candidate !== other)
    .sort((p, q) => rank(q) - rank(p) || p - q);
  return candidates[0] ?? null;
}
