/** Types of atoms in aromatic rings (MMFF94 part I, table III). */
import { AtomType } from './atom-types';
import { bondedBy, coordination, terminalNeighbors } from './bonding';
import { azoliumNitrogens, cationicNitrogens } from './delocalized-cations';
import type { Structure } from './structure';
import { inAromaticRing } from './structure';

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const SULFUR = 16;

/**
 * The type that an aromatic ring gives an atom; undefined for an atom that is in none, or that keeps the type it has
 * outside, as the oxygen of pyrylium does.
 */
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
  if (cationicNitrogens(structure, atom).length > 1) return AtomType.imidazoliumCarbon;
  if (fiveRingsOf(structure, atom).some((ring) => isAnionic(structure, ring))) {
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
  if (coordination(structure, atom) === 3) {
    if (isOxide(structure, atom)) return AtomType.fiveRingOxideNitrogen;
    return rings.some((ring) => azoliumNitrogens(structure, ring).includes(atom))
      ? AtomType.imidazoliumNitrogen
      : AtomType.pyrroleNitrogen;
  }
  if (rings.some((ring) => isAnionic(structure, ring))) return AtomType.anionicRingNitrogen;
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

/** Picks a type by the distances to the atoms that give their lone pair to the ring, over all rings of the atom. */
function byDistance(
  structure: Structure,
  atom: number,
  types: { alpha: number; beta: number; mixed: number },
): number {
  let alpha = false;
  let beta = false;
  for (const ring of fiveRingsOf(structure, atom)) {
    const at = ring.indexOf(atom);
    for (const donor of lonePairDonors(structure, ring)) {
      const steps = Math.abs(ring.indexOf(donor) - at);
      if (Math.min(steps, ring.length - steps) === 1) alpha = true;
      else beta = true;
    }
  }
  if (alpha && beta) return types.mixed;
  return alpha ? types.alpha : types.beta;
}

/** The atom of a ring without a double bond; in an azolium ring, the two nitrogens that may take that part. */
function lonePairDonors(structure: Structure, ring: readonly number[]): number[] {
  const donors = ring.filter((atom) => bondedBy(structure, atom, 2).length === 0);
  const sharers = azoliumNitrogens(structure, ring);
  return donors.some((atom) => sharers.includes(atom)) ? sharers : donors;
}

/** True for a ring whose sextet is completed by a negative nitrogen. */
function isAnionic(structure: Structure, ring: readonly number[]): boolean {
  return ring.some(
    (atom) => structure.charges[atom] === -1 && structure.elements[atom] === NITROGEN,
  );
}
