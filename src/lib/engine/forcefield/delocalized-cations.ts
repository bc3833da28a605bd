/** Amidinium and guanidinium groups, whose charge MMFF94 spreads over their nitrogens (part II, table II). */
import type { Structure } from './structure';
import { bondedBy, coordination, inAromaticRing, terminalNeighbors } from './structure';

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
  const cation = bondedBy(structure, carbon, 2).filter((atom) => isSharer(structure, carbon, atom));
  if (cation.length !== 1 || structure.charges[cation[0]] !== 1) return [];
  const others = bondedBy(structure, carbon, 1).filter(
    (atom) => isSharer(structure, carbon, atom) && structure.charges[atom] === 0,
  );
  return [...cation, ...others];
}

/** How many nitrogens share the charge with this one, itself included, in its largest group; 0 outside any. */
export function cationicGroupSize(structure: Structure, nitrogen: number): number {
  const sizes = structure.neighbors[nitrogen]
    .map(({ atom }) => cationicNitrogens(structure, atom))
    .filter((group) => group.includes(nitrogen))
    .map((group) => group.length);
  return Math.max(0, ...sizes);
}

function isSharer(structure: Structure, carbon: number, atom: number): boolean {
  if (structure.elements[atom] !== NITROGEN || coordination(structure, atom) !== 3) return false;
  if (terminalNeighbors(structure, atom, OXYGEN).length > 0) return false;
  return !inAromaticRing(structure, atom) || shareFiveRing(structure, carbon, atom);
}

/** True when both atoms are in one aromatic ring of five. */
function shareFiveRing(structure: Structure, a: number, b: number): boolean {
  return structure.aromaticRings.some(
    (ring) => ring.length === 5 && ring.includes(a) && ring.includes(b),
  );
}
