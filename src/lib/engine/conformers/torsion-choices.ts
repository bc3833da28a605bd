/** Which torsions to try about a bond, from the kinds of its two ends. */
import type { Molecule } from '../molecule/molecule';
import type { AtomShape } from './ideal-geometry';

const STAGGERED = [60, 180, 300];
const SIXFOLD = [0, 60, 120, 180, 240, 300];
const PLANE = [0, 180];
/** Between two planes that would rather be one but may be in each other's way; leads to planar and to crossed. */
const TWISTED = [40, 140, 220, 320];
const CROSS = [0, 90, 180, 270];
const DISULFIDE = [90, 270];

/**
 * The torsions near which the bond between j and k may have minima, degrees in [0, 360). They are starts for a
 * minimizer: near enough that no minimum of the bond alone is missed (common practice, no source).
 */
export function torsionChoices(
  molecule: Molecule,
  shapes: readonly AtomShape[],
  flat: readonly (readonly number[])[],
  j: number,
  k: number,
): readonly number[] {
  const isPlanar = [j, k].map((atom) => shapes[atom] === 'planar');
  if (isPlanar[0] && isPlanar[1]) return betweenPlanes(molecule, flat, j, k);
  if (isPlanar[0]) return beyondPlane(molecule, j, k);
  if (isPlanar[1]) return beyondPlane(molecule, k, j);
  return betweenTetrahedra(molecule, j, k);
}

function betweenPlanes(
  molecule: Molecule,
  flat: readonly (readonly number[])[],
  j: number,
  k: number,
): readonly number[] {
  const inRing = [j, k].map((atom) => flat.some((ring) => ring.includes(atom)));
  const bringsPair = [j, k].map((atom, end) => !inRing[end] && hasOnlySingleBonds(molecule, atom));
  if (bringsPair[0] && bringsPair[1]) return SIXFOLD;
  if (!bringsPair[0] && !bringsPair[1]) return TWISTED;
  const [donor, other] = bringsPair[0] ? [j, 1] : [k, 0];
  if (!inRing[other]) return PLANE;
  if (molecule.atomicNumbers[donor] !== 8) return TWISTED;
  const isHydroxyl = molecule.neighbors[donor].some(
    ({ atom }) => molecule.atomicNumbers[atom] === 1,
  );
  return isHydroxyl ? PLANE : CROSS;
}

function hasOnlySingleBonds(molecule: Molecule, atom: number): boolean {
  const isHetero = molecule.atomicNumbers[atom] !== 6;
  return isHetero && molecule.neighbors[atom].every(({ bond }) => molecule.bonds[bond].order === 1);
}

function beyondPlane(molecule: Molecule, planar: number, tetrahedral: number): readonly number[] {
  const isEster = molecule.atomicNumbers[planar] === 8 && molecule.atomicNumbers[tetrahedral] === 6;
  const hydrogens = molecule.neighbors[tetrahedral].filter(
    ({ atom }) => molecule.atomicNumbers[atom] === 1,
  );
  return isEster && hydrogens.length >= 2 ? STAGGERED : SIXFOLD;
}

function betweenTetrahedra(molecule: Molecule, j: number, k: number): readonly number[] {
  const elements = [j, k].map((atom) => molecule.atomicNumbers[atom]);
  const degrees = [j, k].map((atom) => molecule.neighbors[atom].length);
  if (elements[0] === 16 && elements[1] === 16 && degrees[0] === 2 && degrees[1] === 2) {
    return DISULFIDE;
  }
  const isSulfonamide = [0, 1].some(
    (end) => elements[end] === 16 && degrees[end] === 4 && elements[1 - end] === 7,
  );
  return isSulfonamide ? SIXFOLD : STAGGERED;
}
