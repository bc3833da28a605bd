/** Types of atoms in aromatic rings (MMFF94 part I, table III). */
import { AtomType } from './atom-types';
import { cationicGroupSize, cationicNitrogens } from './delocalized-cations';
import type { Structure } from './structure';
import { bondedBy, coordination, inAromaticRing, terminalNeighbors } from './structure';

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const SULFUR = 16;

/** The type of an atom in an aromatic ring; undefined for an atom that is in none, or that MMFF94 does not know there. */
export function aromaticType(structure: Structure, atom: number): number | undefined {
  // An atom of both a five- and a six-membered ring, as in indole, is typed by the five-membered one.
  if (inAromaticRing(structure, atom, 5)) return fiveRingType(structure, atom);
  if (inAromaticRing(structure, atom, 6)) return sixRingType(structure, atom);
  return undefined;
}

function sixRingType(structure: Structure, atom: number): number | undefined {
  if (structure.elements[atom] === CARBON) return AtomType.benzeneCarbon;
  if (structure.elements[atom] !== NITROGEN) return undefined;
  if (coordination(structure, atom) === 2) return AtomType.pyridineNitrogen;
  return isOxide(structure, atom) ? AtomType.pyridineOxideNitrogen : AtomType.pyridiniumNitrogen;
}

function fiveRingType(structure: Structure, atom: number): number | undefined {
  switch (structure.elements[atom]) {
    case CARBON:
      return fiveRingCarbonType(structure, atom);
    case NITROGEN:
      return fiveRingNitrogenType(structure, atom);
    case OXYGEN:
      return AtomType.furanOxygen;
    case SULFUR:
      return AtomType.thiopheneSulfur;
    default:
      return undefined;
  }
}

function fiveRingCarbonType(structure: Structure, atom: number): number {
  const rings = fiveRingsOf(structure, atom);
  if (cationicNitrogens(structure, atom).length > 1) return AtomType.imidazoliumCarbon;
  if (rings.some((ring) => isAnionic(structure, ring) || isDelocalizedCation(structure, ring))) {
    return AtomType.fiveRingCarbon;
  }
  return byDistance(structure, atom, {
    alpha: AtomType.alphaCarbon,
    beta: AtomType.betaCarbon,
    mixed: AtomType.fiveRingCarbon,
  });
}

function fiveRingNitrogenType(structure: Structure, atom: number): number {
  const rings = fiveRingsOf(structure, atom);
  if (rings.some((ring) => isAnionic(structure, ring))) return AtomType.anionicRingNitrogen;
  if (coordination(structure, atom) === 3) {
    if (isOxide(structure, atom)) return AtomType.fiveRingOxideNitrogen;
    const isCationic =
      structure.charges[atom] === 1 || cationicGroupSize(structure, atom) > 1;
    return isCationic ? AtomType.imidazoliumNitrogen : AtomType.pyrroleNitrogen;
  }
  if (rings.some((ring) => isDelocalizedCation(structure, ring))) return AtomType.fiveRingNitrogen;
  return byDistance(structure, atom, {
    alpha: AtomType.alphaNitrogen,
    beta: AtomType.betaNitrogen,
    mixed: AtomType.fiveRingNitrogen,
  });
}

function fiveRingsOf(structure: Structure, atom: number): (readonly number[])[] {
  return structure.aromaticRings.filter((ring) => ring.length === 5 && ring.includes(atom));
}

/** N⁺–O⁻ with nothing else on the oxygen. */
function isOxide(structure: Structure, atom: number): boolean {
  return terminalNeighbors(structure, atom, OXYGEN).length > 0;
}

/** Picks a type by the distance to the atom that gives its lone pair to the ring, over all rings of the atom. */
function byDistance(
  structure: Structure,
  atom: number,
  types: { alpha: number; beta: number; mixed: number },
): number {
  let alpha = false;
  let beta = false;
  for (const ring of fiveRingsOf(structure, atom)) {
    const size = ring.length;
    const donor = ring.findIndex((other) => isDonor(structure, other));
    const steps = Math.abs(donor - ring.indexOf(atom));
    if (Math.min(steps, size - steps) === 1) alpha = true;
    else beta = true;
  }
  if (alpha && beta) return types.mixed;
  return alpha ? types.alpha : types.beta;
}

/** The atom of a five-membered aromatic ring without a double bond. */
function isDonor(structure: Structure, atom: number): boolean {
  return bondedBy(structure, atom, 2).length === 0;
}

/** True for a ring whose sextet is completed by a negative nitrogen. */
function isAnionic(structure: Structure, ring: readonly number[]): boolean {
  return ring.some(
    (atom) => structure.charges[atom] === -1 && structure.elements[atom] === NITROGEN,
  );
}

/** True for an imidazolium-like ring: N–C=N⁺ with both nitrogens in the ring and three-coordinate. */
function isDelocalizedCation(structure: Structure, ring: readonly number[]): boolean {
  return ring.some(
    (atom) => cationicNitrogens(structure, atom).filter((other) => ring.includes(other)).length > 1,
  );
}
