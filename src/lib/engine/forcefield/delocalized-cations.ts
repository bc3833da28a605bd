/**
 * Amidinium, guanidinium and azolium groups, over whose nitrogens MMFF94 spreads the charge (part I, table III; part II,
 * table II). Written so that it does not matter on which of the equivalent nitrogens the charge was drawn.
 */
import { areBonded, bondedBy, coordination, terminalNeighbors } from './bonding';
import type { Structure } from './structure';
import { inAromaticRing } from './structure';

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;

/**
 * The nitrogens over which a carbon spreads a positive charge: the one of C=N⁺ and every other three-coordinate
 * nitrogen bonded to it. Empty without a C=N⁺; one for a plain iminium, two for an amidinium, three for a guanidinium.
 * Nitrogens that belong to an aromatic ring count only for a carbon of the same five-membered ring, as in imidazolium.
 */
export function cationicNitrogens(structure: Structure, carbon: number): number[] {
  if (structure.elements[carbon] !== CARBON || coordination(structure, carbon) !== 3) return [];
  if (inAromaticRing(structure, carbon) && !inAromaticRing(structure, carbon, 5)) return [];
  const candidates = structure.neighbors[carbon]
    .map(({ atom }) => atom)
    .filter((atom) => isTrigonal(structure, atom))
    .filter(
      (atom) =>
        !inAromaticRing(structure, atom) || sharedFiveRings(structure, carbon, atom).length > 0,
    );
  const cations = candidates.filter((atom) => isIminium(structure, carbon, atom));
  if (cations.length === 0) return [];
  const others = candidates.filter(
    (atom) => !cations.includes(atom) && structure.charges[atom] === 0,
  );
  return [...cations, ...others];
}

/** How many nitrogens share the charge with this one, itself included, in its largest group; 0 outside any. */
export function cationicGroupSize(structure: Structure, nitrogen: number): number {
  const sizes = structure.neighbors[nitrogen]
    .map(({ atom }) => cationicNitrogens(structure, atom))
    .filter((group) => group.includes(nitrogen))
    .map((group) => group.length);
  return Math.max(0, ...sizes);
}

/**
 * The nitrogens over which a five-membered aromatic ring spreads a positive charge: the charged one, and the one that
 * gives its lone pair to the ring. Empty for a ring without charged three-coordinate nitrogen.
 */
export function azoliumNitrogens(structure: Structure, ring: readonly number[]): number[] {
  const trigonal = ring.filter((atom) => isTrigonal(structure, atom));
  if (!trigonal.some((atom) => structure.charges[atom] === 1)) return [];
  return trigonal.filter(
    (atom) => structure.charges[atom] === 1 || bondedBy(structure, atom, 2).length === 0,
  );
}

/** The five-membered aromatic rings that hold both atoms. */
function sharedFiveRings(structure: Structure, a: number, b: number): (readonly number[])[] {
  return structure.aromaticRings.filter(
    (ring) => ring.length === 5 && ring.includes(a) && ring.includes(b),
  );
}

/** Three-coordinate nitrogen that bears no oxide. */
function isTrigonal(structure: Structure, atom: number): boolean {
  return (
    structure.elements[atom] === NITROGEN &&
    coordination(structure, atom) === 3 &&
    terminalNeighbors(structure, atom, OXYGEN).length === 0
  );
}

/** True when C=N⁺ is drawn between the two, or would be with the charge on the other nitrogen of an azolium ring. */
function isIminium(structure: Structure, carbon: number, nitrogen: number): boolean {
  if (structure.charges[nitrogen] === 1 && bondedBy(structure, carbon, 2).includes(nitrogen)) {
    return true;
  }
  return sharedFiveRings(structure, carbon, nitrogen).some((ring) => {
    const sharers = azoliumNitrogens(structure, ring);
    if (!sharers.includes(nitrogen)) return false;
    return sharers
      .filter((other) => other !== nitrogen)
      .some(
        (other) =>
          areBonded(structure, carbon, other) ||
          (structure.charges[nitrogen] === 0 && areBonded(structure, nitrogen, other)),
      );
  });
}
