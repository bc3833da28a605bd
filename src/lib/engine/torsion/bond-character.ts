/** What kind of single bond a torsion turns about, as far as the names of its conformations depend on it. */
import { bondedBy } from '../forcefield/bonding';
import { inAromaticRing, perceiveStructure } from '../forcefield/structure';
import type { Structure } from '../forcefield/structure';
import type { Molecule } from '../molecule/molecule';
import { createPriorities, rankedSubstituents } from '../molecule/priority';
import type { TorsionAtoms } from './scan-symmetry';

export type BondCharacter =
  | {
      readonly kind: 'saturated';
      readonly bond: readonly [number, number];
      /** Substituents of either end. */
      readonly fronts: readonly number[];
      readonly rears: readonly number[];
      /** The torsion that anti and gauche refer to; null where the ends are symmetric tops. */
      readonly reference: TorsionAtoms | null;
    }
  /** Between two double bonds, X=j-k=Y. */
  | { readonly kind: 'diene'; readonly reference: TorsionAtoms }
  /** An amide or ester: Z and E by the highest-ranking substituents of either end. */
  | { readonly kind: 'acyl'; readonly reference: TorsionAtoms }
  /** Both ends flat or conjugated, without a pair of double bonds to name sides by. */
  | { readonly kind: 'planar'; readonly reference: TorsionAtoms }
  | { readonly kind: 'other'; readonly reference: TorsionAtoms };

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const SULFUR = 16;

/** Classifies the middle bond of a torsion. `classes` are the symmetry classes of the atoms. */
export function characterizeBond(
  molecule: Molecule,
  atoms: TorsionAtoms,
  classes: Readonly<Int32Array>,
): BondCharacter {
  const structure = perceiveStructure(molecule);
  const [, j, k] = atoms;
  const acyl = acylReference(structure, classes, j, k) ?? acylReference(structure, classes, k, j);
  if (acyl) return { kind: 'acyl', reference: acyl };
  const first = uniquePartner(structure, j);
  const second = uniquePartner(structure, k);
  if (first !== null && second !== null) return { kind: 'diene', reference: [first, j, k, second] };
  const flat = [hasPi(structure, j), hasPi(structure, k)];
  if (
    (flat[0] && (flat[1] || hasLonePair(structure, k))) ||
    (flat[1] && hasLonePair(structure, j))
  ) {
    return { kind: 'planar', reference: atoms };
  }
  if (flat[0] || flat[1]) return { kind: 'other', reference: atoms };
  return {
    kind: 'saturated',
    bond: [j, k],
    fronts: substituentsOf(molecule, j, k),
    rears: substituentsOf(molecule, k, j),
    reference: saturatedReference(molecule, atoms, classes),
  };
}

/** The torsion as given, when both its end atoms stand out among the substituents of their ends. */
function saturatedReference(
  molecule: Molecule,
  atoms: TorsionAtoms,
  classes: Readonly<Int32Array>,
): TorsionAtoms | null {
  const [i, j, k, l] = atoms;
  const standsOut = (atom: number, center: number, other: number): boolean => {
    const alike = substituentsOf(molecule, center, other).filter(
      (a) => classes[a] === classes[atom],
    );
    if (alike.length === 1) return true;
    return alike.length === 2 && molecule.atomicNumbers[atom] > 1;
  };
  return standsOut(i, j, k) && standsOut(l, k, j) ? atoms : null;
}

/** O=C-N or O=C-O (and S for O) from the carbonyl's end, with the highest-ranking substituents; else null. */
function acylReference(
  structure: Structure,
  classes: Readonly<Int32Array>,
  j: number,
  k: number,
): TorsionAtoms | null {
  const { molecule, elements, charges } = structure;
  if (elements[j] !== CARBON || inAromaticRing(structure, j) || inAromaticRing(structure, k)) {
    return null;
  }
  const isCarbonyl = bondedBy(structure, j, 2).some((a) => [OXYGEN, SULFUR].includes(elements[a]));
  const isDonor = [NITROGEN, OXYGEN, SULFUR].includes(elements[k]) && hasLonePair(structure, k);
  if (!isCarbonyl || !isDonor || charges[k] !== 0) return null;
  const i = highestSubstituent(molecule, classes, j, k);
  const l = highestSubstituent(molecule, classes, k, j);
  return i === null || l === null ? null : [i, j, k, l];
}

/** The atom at the other end of an atom's double bond; null without one, or where the ring may be drawn otherwise. */
function uniquePartner(structure: Structure, atom: number): number | null {
  const partners = bondedBy(structure, atom, 2);
  if (partners.length !== 1 || inAromaticRing(structure, atom, 6)) return null;
  const { elements } = structure;
  if (elements[atom] !== CARBON && elements[atom] !== NITROGEN) return null;
  // Nitro groups and carboxylates have two ends that are alike.
  const alike = structure.neighbors[atom].filter(
    (neighbor) =>
      elements[neighbor.atom] === elements[partners[0]] &&
      structure.neighbors[neighbor.atom].length === 1,
  );
  return alike.length > 1 ? null : partners[0];
}

function hasPi(structure: Structure, atom: number): boolean {
  return (
    inAromaticRing(structure, atom) ||
    (bondedBy(structure, atom, 2).length > 0 && structure.elements[atom] <= 10)
  );
}

function hasLonePair(structure: Structure, atom: number): boolean {
  const element = structure.elements[atom];
  const bonded = structure.neighbors[atom].length;
  if (structure.charges[atom] > 0 || bondedBy(structure, atom, 2).length > 0) return false;
  if (element === NITROGEN) return bonded <= 3;
  return (element === OXYGEN || element === SULFUR) && bonded <= 2;
}

/** The highest-ranking substituent of `center` other than `except`; null when two alike ones share the rank. */
function highestSubstituent(
  molecule: Molecule,
  classes: Readonly<Int32Array>,
  center: number,
  except: number,
): number | null {
  const priorities = createPriorities(molecule);
  const [first, second] = rankedSubstituents(molecule, priorities, center, except);
  if (first === undefined) return null;
  return second !== undefined && classes[first] === classes[second] ? null : first;
}

function substituentsOf(molecule: Molecule, center: number, except: number): number[] {
  return molecule.neighbors[center].map(({ atom }) => atom).filter((atom) => atom !== except);
}
