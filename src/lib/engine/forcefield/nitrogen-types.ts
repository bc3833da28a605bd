/** Types of nitrogen outside aromatic rings (MMFF94 part I, table III). */
import { AtomType } from './atom-types';
import { bondedBy, coordination, hasDoubleTo, terminalNeighbors } from './bonding';
import { cationicGroupSize } from './delocalized-cations';
import type { Structure } from './structure';
import { inAromaticRing } from './structure';

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const PHOSPHORUS = 15;
const SULFUR = 16;

/** The type of a nitrogen outside aromatic rings; undefined when MMFF94 has none. */
export function nitrogenType(structure: Structure, atom: number): number | undefined {
  switch (coordination(structure, atom)) {
    case 4:
      return terminalNeighbors(structure, atom, OXYGEN).length > 0
        ? AtomType.amineOxideNitrogen
        : AtomType.ammoniumNitrogen;
    case 3:
      return trigonalType(structure, atom);
    case 2:
      return digonalType(structure, atom);
    case 1:
      return terminalType(structure, atom);
    default:
      return undefined;
  }
}

function trigonalType(structure: Structure, atom: number): number | undefined {
  if (structure.charges[atom] === 0) return trivalentType(structure, atom);
  const oxides = terminalNeighbors(structure, atom, OXYGEN).length;
  if (oxides >= 2) return AtomType.nitroNitrogen;
  if (!hasDoubleTo(structure, atom, CARBON, NITROGEN)) return undefined;
  if (oxides === 1) return AtomType.nitroneNitrogen;
  return sharedChargeType(structure, atom) ?? AtomType.iminiumNitrogen;
}

/** The type within an amidinium or guanidinium group; undefined outside one. */
function sharedChargeType(structure: Structure, atom: number): number | undefined {
  const size = cationicGroupSize(structure, atom);
  if (size < 2) return undefined;
  return size === 3 ? AtomType.guanidiniumNitrogen : AtomType.amidiniumNitrogen;
}

/** Neutral nitrogen with three single bonds: what it is bonded to decides. */
function trivalentType(structure: Structure, atom: number): number {
  const shared = sharedChargeType(structure, atom);
  if (shared !== undefined) return shared;
  const neighbors = structure.neighbors[atom].map((neighbor) => neighbor.atom);
  if (neighbors.some((other) => isStrongAcceptor(structure, other))) {
    return AtomType.sulfonamideNitrogen;
  }
  if (neighbors.some((other) => isCarbonyl(structure, other))) return AtomType.amideNitrogen;
  if (neighbors.some((other) => makesEnamine(structure, other))) return AtomType.enamineNitrogen;
  if (neighbors.some((other) => isHydrazone(structure, other))) return AtomType.amideNitrogen;
  return AtomType.amineNitrogen;
}

/** Sulfur or phosphorus with two or more terminal oxygens, or a nitrile carbon. */
function isStrongAcceptor(structure: Structure, atom: number): boolean {
  switch (structure.elements[atom]) {
    case SULFUR:
    case PHOSPHORUS:
      return terminalNeighbors(structure, atom, OXYGEN).length >= 2;
    case CARBON:
      return bondedBy(structure, atom, 3).some((other) => structure.elements[other] === NITROGEN);
    default:
      return false;
  }
}

/** Nonaromatic C=O and C=S. */
function isCarbonyl(structure: Structure, atom: number): boolean {
  return (
    structure.elements[atom] === CARBON &&
    !inAromaticRing(structure, atom) &&
    hasDoubleTo(structure, atom, OXYGEN, SULFUR)
  );
}

/** Nonaromatic N=N, and N=C whose carbon bears neither nitrogen, oxygen nor sulfur by a single bond. */
function isHydrazone(structure: Structure, atom: number): boolean {
  if (structure.elements[atom] !== NITROGEN || inAromaticRing(structure, atom)) return false;
  return bondedBy(structure, atom, 2).some(
    (other) =>
      structure.elements[other] === NITROGEN ||
      (structure.elements[other] === CARBON &&
        !bondedBy(structure, other, 1).some((next) =>
          [NITROGEN, OXYGEN, SULFUR].includes(structure.elements[next]),
        )),
  );
}

/** C=C, C=N, C=P, C≡C and aromatic carbon. */
function makesEnamine(structure: Structure, atom: number): boolean {
  if (structure.elements[atom] !== CARBON) return false;
  return (
    hasDoubleTo(structure, atom, CARBON, NITROGEN, PHOSPHORUS) ||
    bondedBy(structure, atom, 3).length > 0
  );
}

function digonalType(structure: Structure, atom: number): number | undefined {
  if (structure.charges[atom] === -1) return AtomType.anionicNitrogen;
  if (structure.charges[atom] === 1) {
    if (isDiazoniumOrIsonitrile(structure, atom)) return AtomType.diazoniumNitrogen;
    return bondedBy(structure, atom, 2).length === 2 ? AtomType.cumulatedNitrogen : undefined;
  }
  if (hasDoubleTo(structure, atom, OXYGEN)) return AtomType.nitrosoNitrogen;
  if (hasDoubleTo(structure, atom, CARBON, NITROGEN)) return AtomType.imineNitrogen;
  const [sulfur] = bondedBy(structure, atom, 2);
  if (sulfur === undefined || structure.elements[sulfur] !== SULFUR) return undefined;
  switch (coordination(structure, sulfur)) {
    case 4:
      return AtomType.sulfoximineNitrogen;
    case 3:
      return structure.neighbors[atom].some((next) => isStrongAcceptor(structure, next.atom))
        ? AtomType.sulfonamideNitrogen
        : undefined;
    default:
      return undefined;
  }
}

/** –N⁺≡N or –N⁺≡C⁻; a nitrilium ion, –N⁺≡C–, is neither. */
function isDiazoniumOrIsonitrile(structure: Structure, atom: number): boolean {
  return bondedBy(structure, atom, 3).some((other) => coordination(structure, other) === 1);
}

function terminalType(structure: Structure, atom: number): number | undefined {
  if (bondedBy(structure, atom, 3).length === 1) return AtomType.tripleNitrogen;
  const [middle] = bondedBy(structure, atom, 2);
  const endsCumulene = middle !== undefined && bondedBy(structure, middle, 2).length === 2;
  return endsCumulene && structure.charges[atom] === -1
    ? AtomType.terminalAzideNitrogen
    : undefined;
}
