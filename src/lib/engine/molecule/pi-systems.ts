/** Local bonding: which atoms belong to π systems, bear lone pairs or are linear. */
import type { Molecule } from './molecule';

/** Single bonds with a name of their own. */
export type Linkage = 'amide' | 'ester' | 'carboxylic-acid';

/** Elements of the second period and sulfur, whose multiple bonds conjugate. */
const CONJUGATING = new Set([5, 6, 7, 8, 16]);

function highestOrder(molecule: Molecule, atom: number): number {
  return Math.max(0, ...molecule.neighbors[atom].map(({ bond }) => molecule.bonds[bond].order));
}

function valence(molecule: Molecule, atom: number): number {
  return molecule.neighbors[atom].reduce((sum, { bond }) => sum + molecule.bonds[bond].order, 0);
}

/** True for atoms at the end of a triple bond or between two double bonds: two neighbors in a line. */
export function isLinear(molecule: Molecule, atom: number): boolean {
  if (molecule.neighbors[atom].length !== 2 || molecule.atomicNumbers[atom] > 10) return false;
  return valence(molecule, atom) === 4;
}

/**
 * True for atoms of a π system: a double or triple bond at the atom (not on sulfur or phosphorus beyond their lowest
 * valence, whose S=O is no such bond), or an empty p orbital on boron or a carbocation.
 */
export function isPi(molecule: Molecule, atom: number): boolean {
  const element = molecule.atomicNumbers[atom];
  if (!CONJUGATING.has(element)) return false;
  if (element === 16 && valence(molecule, atom) > 3) return false;
  if (highestOrder(molecule, atom) > 1) return true;
  const degree = molecule.neighbors[atom].length;
  return degree === 3 && (element === 5 || (element === 6 && molecule.formalCharges[atom] > 0));
}

/** True for nitrogen, oxygen, sulfur and carbanions with a lone pair and single bonds only. */
export function hasLonePair(molecule: Molecule, atom: number): boolean {
  if (highestOrder(molecule, atom) > 1) return false;
  const degree = molecule.neighbors[atom].length;
  const charge = molecule.formalCharges[atom];
  switch (molecule.atomicNumbers[atom]) {
    case 6:
      return charge < 0 && degree === 3;
    case 7:
      return charge <= 0 && degree <= 3;
    case 8:
    case 16:
      return charge <= 0 && degree <= 2;
    default:
      return false;
  }
}

/** The name of the single bond between a carbonyl (or thiocarbonyl) carbon and its nitrogen or oxygen. */
export function linkageOf(molecule: Molecule, a: number, b: number): Linkage | null {
  return linkageFrom(molecule, a, b) ?? linkageFrom(molecule, b, a);
}

function linkageFrom(molecule: Molecule, carbon: number, hetero: number): Linkage | null {
  if (molecule.atomicNumbers[carbon] !== 6) return null;
  const carbonyl = molecule.neighbors[carbon].some(
    ({ atom, bond }) =>
      molecule.bonds[bond].order === 2 && [8, 16].includes(molecule.atomicNumbers[atom]),
  );
  if (!carbonyl || !hasLonePair(molecule, hetero)) return null;
  if (molecule.atomicNumbers[hetero] === 7) return 'amide';
  if (molecule.neighbors[hetero].length < 2) return null;
  const acid = molecule.neighbors[hetero].some(({ atom }) => molecule.atomicNumbers[atom] === 1);
  return acid ? 'carboxylic-acid' : 'ester';
}
