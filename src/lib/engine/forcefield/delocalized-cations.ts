/** Amidinium and guanidinium groups, whose charge MMFF94 spreads over their nitrogens (part II, table II). */
import type { Structure } from './structure';
import { bondedBy, coordination, inAromaticRing, terminalNeighbors } from './structure';

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;

/**
 * The nitrogens over which a carbon outside aromatic rings spreads a positive charge: the one of C=N⁺ and every other
 * three-coordinate nitrogen bonded to it. Empty without a C=N⁺; one for a plain iminium, two for an amidinium, three
 * for a guanidinium.
 */
export function cationicNitrogens(structure: Structure, carbon: number): number[] {
  if (structure.elements[carbon] !== CARBON || coordination(structure, carbon) !== 3) return [];
  if (inAromaticRing(structure, carbon)) return [];
  const iminium = bondedBy(structure, carbon, 2).filter((atom) => isCandidate(structure, atom));
  if (iminium.length !== 1 || structure.charges[iminium[0]] !== 1) return [];
  const others = bondedBy(structure, carbon, 1).filter(
    (atom) => isCandidate(structure, atom) && structure.charges[atom] === 0,
  );
  return [...iminium, ...others];
}

function isCandidate(structure: Structure, atom: number): boolean {
  return (
    structure.elements[atom] === NITROGEN &&
    coordination(structure, atom) === 3 &&
    !inAromaticRing(structure, atom) &&
    terminalNeighbors(structure, atom, OXYGEN).length === 0
  );
}
