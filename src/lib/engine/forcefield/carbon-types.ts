/** Types of carbon and silicon outside aromatic rings (MMFF94 part I, table III). */
import { AtomType } from './atom-types';
import { bondedBy, coordination, hasDoubleTo, terminalNeighbors } from './bonding';
import { cationicNitrogens } from './delocalized-cations';
import type { Structure } from './structure';
import { inRingOfSize } from './structure';

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const PHOSPHORUS = 15;
const SULFUR = 16;

/** The type of a carbon outside aromatic rings; undefined when MMFF94 has none. */
export function carbonType(structure: Structure, atom: number): number | undefined {
  if (structure.charges[atom] !== 0) return isonitrileType(structure, atom);
  switch (coordination(structure, atom)) {
    case 4:
      if (inRingOfSize(structure, atom, 3)) return AtomType.cyclopropylCarbon;
      if (inRingOfSize(structure, atom, 4)) return AtomType.cyclobutylCarbon;
      return AtomType.alkylCarbon;
    case 3:
      return trigonalType(structure, atom);
    case 2:
      return isDigonal(structure, atom) ? AtomType.acetylenicCarbon : undefined;
    default:
      return undefined;
  }
}

function isonitrileType(structure: Structure, atom: number): number | undefined {
  const [nitrogen] = bondedBy(structure, atom, 3);
  const isIsonitrile =
    structure.charges[atom] === -1 &&
    coordination(structure, atom) === 1 &&
    nitrogen !== undefined &&
    structure.elements[nitrogen] === NITROGEN &&
    structure.charges[nitrogen] === 1;
  return isIsonitrile ? AtomType.isonitrileCarbon : undefined;
}

function trigonalType(structure: Structure, atom: number): number | undefined {
  if (bondedBy(structure, atom, 2).length !== 1) return undefined;
  if (cationicNitrogens(structure, atom).length > 1) return AtomType.amidiniumCarbon;
  if (isCarboxylate(structure, atom)) return AtomType.carboxylateCarbon;
  if (hasDoubleTo(structure, atom, NITROGEN, OXYGEN, PHOSPHORUS, SULFUR)) {
    return AtomType.carbonylCarbon;
  }
  if (!hasDoubleTo(structure, atom, CARBON)) return undefined;
  return inRingOfSize(structure, atom, 4) ? AtomType.cyclobutenylCarbon : AtomType.vinylCarbon;
}

/** –CO₂⁻ or –CS₂⁻: two terminal chalcogens of one kind that share a negative charge. */
export function isCarboxylate(structure: Structure, atom: number): boolean {
  return [OXYGEN, SULFUR].some((element) => {
    const terminal = terminalNeighbors(structure, atom, element);
    return terminal.length === 2 && terminal.some((other) => structure.charges[other] === -1);
  });
}

function isDigonal(structure: Structure, atom: number): boolean {
  return bondedBy(structure, atom, 3).length === 1 || bondedBy(structure, atom, 2).length === 2;
}
