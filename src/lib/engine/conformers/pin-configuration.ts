/** Settles the configuration of what the input left open. */
import { createMolecule } from '../molecule/build';
import type { Molecule, Stereobond, Stereocenter } from '../molecule/molecule';
import { handedness, isCis } from '../molecule/stereo';

/**
 * The molecule with its undefined stereocentres and double bonds as they are in a geometry (Å, 3N): a search must not
 * mix the conformers of two stereoisomers.
 */
export function pinConfiguration(molecule: Molecule, x: Float64Array): Molecule {
  const centers: Stereocenter[] = [];
  const bonds: Stereobond[] = [];
  for (const { code, atom } of molecule.warnings) {
    if (atom === undefined) continue;
    if (code === 'undefined-stereocenter') centers.push(...pinCenter(molecule, x, atom));
    if (code === 'undefined-double-bond') bonds.push(...pinBonds(molecule, x, atom));
  }
  if (centers.length + bonds.length === 0) return molecule;
  return createMolecule({
    ...molecule,
    stereocenters: [...molecule.stereocenters, ...centers],
    stereobonds: [...molecule.stereobonds, ...bonds],
  });
}

function pinCenter(molecule: Molecule, x: Float64Array, atom: number): Stereocenter[] {
  const around = molecule.neighbors[atom].map((neighbor) => neighbor.atom);
  if (around.length < 3 || around.length > 4) return [];
  // An amine's pyramid is no configuration: it inverts, and its forms are conformers.
  if (molecule.atomicNumbers[atom] === 7 && around.length === 3) return [];
  const [a, b, c, d = -1] = around;
  const neighbors = [a, b, c, d] as const;
  return [{ atom, neighbors, clockwise: handedness(x, atom, neighbors) > 0 }];
}

function pinBonds(molecule: Molecule, x: Float64Array, atom: number): Stereobond[] {
  return molecule.neighbors[atom].flatMap(({ atom: other, bond }) => {
    const known = molecule.stereobonds.some((stereobond) => stereobond.bond === bond);
    if (molecule.bonds[bond].order !== 2 || known) return [];
    const [first] = molecule.neighbors[atom].filter((neighbor) => neighbor.atom !== other);
    const [last] = molecule.neighbors[other].filter((neighbor) => neighbor.atom !== atom);
    if (!first || !last) return [];
    const atoms = [first.atom, atom, other, last.atom] as const;
    return [{ bond, atoms, cis: isCis(x, atoms) }];
  });
}
