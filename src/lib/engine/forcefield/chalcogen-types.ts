/** Types of oxygen, sulfur and phosphorus outside aromatic rings (MMFF94 part I, table III). */
import { AtomType } from './atom-types';
import { bondedBy, coordination, hasDoubleTo, terminalNeighbors } from './bonding';
import { isCarboxylate } from './carbon-types';
import type { Structure } from './structure';

const HYDROGEN = 1;
const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const PHOSPHORUS = 15;
const SULFUR = 16;
const CHLORINE = 17;

/** The type of an oxygen outside aromatic rings; undefined when MMFF94 has none. */
export function oxygenType(structure: Structure, atom: number): number | undefined {
  const neighbors = structure.neighbors[atom].map((neighbor) => neighbor.atom);
  switch (neighbors.length) {
    case 3:
      return AtomType.oxoniumOxygen;
    case 2:
      if (bondedBy(structure, atom, 2).length > 0) return AtomType.oxeniumOxygen;
      return neighbors.every((other) => structure.elements[other] === HYDROGEN)
        ? AtomType.waterOxygen
        : AtomType.divalentOxygen;
    case 1:
      return terminalOxygenType(structure, atom, neighbors[0]);
    default:
      return undefined;
  }
}

function terminalOxygenType(
  structure: Structure,
  atom: number,
  center: number,
): number | undefined {
  const isDouble = bondedBy(structure, atom, 2).length === 1;
  const isOxide = structure.charges[atom] === -1;
  switch (structure.elements[center]) {
    case HYDROGEN:
      return isOxide ? AtomType.oxideOxygen : undefined;
    case CARBON:
      if (isCarboxylate(structure, center)) return AtomType.terminalOxygen;
      break;
    case NITROGEN:
      if (structure.charges[center] !== 1) break;
      return coordination(structure, center) > 2 ? AtomType.terminalOxygen : undefined;
    case SULFUR:
      return isSingleSulfinyl(structure, center) ? AtomType.doubleOxygen : AtomType.terminalOxygen;
    case PHOSPHORUS:
    case CHLORINE:
      return AtomType.terminalOxygen;
    default:
      return undefined;
  }
  if (isDouble) return AtomType.doubleOxygen;
  return isOxide ? AtomType.oxideOxygen : undefined;
}

/** Sulfur of a sulfoxide or a C=S=O group: at most three-coordinate, with one terminal chalcogen. */
function isSingleSulfinyl(structure: Structure, sulfur: number): boolean {
  return (
    coordination(structure, sulfur) <= 3 &&
    terminalNeighbors(structure, sulfur, OXYGEN, SULFUR).length === 1
  );
}

/** The type of a sulfur outside aromatic rings; undefined when MMFF94 has none. */
export function sulfurType(structure: Structure, atom: number): number | undefined {
  switch (coordination(structure, atom)) {
    case 4:
      return isSulfone(structure, atom) ? AtomType.sulfoneSulfur : undefined;
    case 3:
      return tricoordinateSulfurType(structure, atom);
    case 2:
      if (hasDoubleTo(structure, atom, CARBON) && hasDoubleTo(structure, atom, OXYGEN)) {
        return AtomType.sulfinylSulfur;
      }
      return bondedBy(structure, atom, 1).length === 2 ? AtomType.divalentSulfur : undefined;
    case 1:
      return terminalSulfurType(structure, atom);
    default:
      return undefined;
  }
}

/** True with at least two terminal or doubly bonded neighbors (=O, –O⁻, =N–). */
function isSulfone(structure: Structure, atom: number): boolean {
  const unsaturated = new Set([
    ...bondedBy(structure, atom, 2),
    ...terminalNeighbors(structure, atom, OXYGEN, SULFUR),
  ]);
  return unsaturated.size >= 2;
}

function tricoordinateSulfurType(structure: Structure, atom: number): number | undefined {
  const terminal = terminalNeighbors(structure, atom, OXYGEN, SULFUR);
  if (terminal.length === 2) {
    if (hasDoubleTo(structure, atom, CARBON)) return AtomType.sulfoneSulfur;
    const isAnion = terminal.some((other) => structure.charges[other] === -1);
    return isAnion ? AtomType.sulfinateSulfur : undefined;
  }
  return terminal.length < 2 && hasDoubleTo(structure, atom, OXYGEN, NITROGEN)
    ? AtomType.sulfoxideSulfur
    : undefined;
}

function terminalSulfurType(structure: Structure, atom: number): number | undefined {
  const center = structure.neighbors[atom][0].atom;
  switch (structure.elements[center]) {
    case PHOSPHORUS:
    case SULFUR:
      return AtomType.terminalSulfur;
    case CARBON:
      if (structure.charges[atom] === -1 || isCarboxylate(structure, center)) {
        return AtomType.terminalSulfur;
      }
      return hasDoubleTo(structure, atom, CARBON) ? AtomType.doubleSulfur : undefined;
    default:
      return undefined;
  }
}

/** The type of a phosphorus; undefined when MMFF94 has none. */
export function phosphorusType(structure: Structure, atom: number): number | undefined {
  switch (coordination(structure, atom)) {
    case 4:
      return AtomType.tetrahedralPhosphorus;
    case 3:
      return AtomType.tricoordinatePhosphorus;
    case 2:
      return hasDoubleTo(structure, atom, CARBON) ? AtomType.doublePhosphorus : undefined;
    default:
      return undefined;
  }
}
