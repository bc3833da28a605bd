/** The integer classes that MMFF94 tells bonds, angles, stretch-bends and torsions apart by (part I and part IV). */
import { AtomType } from './atom-types';
import { areBonded } from './bonding';
import type { Parameters } from './parameters';
import type { Structure } from './structure';

/** Per bond: 1 for a single bond between two multiply bonded atoms that is no edge of an aromatic ring, 0 otherwise. */
export function findBondClasses(
  structure: Structure,
  types: Readonly<Int32Array>,
  parameters: Parameters,
): Uint8Array {
  return Uint8Array.from(structure.molecule.bonds, (_, bond) =>
    bondClass(structure, types, parameters, bond),
  );
}

function bondClass(
  structure: Structure,
  types: Readonly<Int32Array>,
  parameters: Parameters,
  bond: number,
): number {
  if (structure.orders[bond] !== 1 || structure.aromaticBonds[bond]) return 0;
  const { a, b } = structure.molecule.bonds[bond];
  const first = parameters.properties.get(types[a]);
  const second = parameters.properties.get(types[b]);
  if (!first || !second) return 0;
  const isJoined =
    (first.singleBetweenMultiple && second.singleBetweenMultiple) ||
    (first.aromatic && second.aromatic);
  return isJoined ? 1 : 0;
}

/** 3 or 4 when the angle i-j-k lies in a ring of that size, 0 otherwise. */
export function angleRingSize(structure: Structure, i: number, j: number, k: number): 0 | 3 | 4 {
  if (areBonded(structure, i, k)) return 3;
  const closes = structure.neighbors[i].some(
    ({ atom }) => atom !== j && areBonded(structure, atom, k),
  );
  return closes ? 4 : 0;
}

/** Angle class from the ring size and the classes of both bonds (part III, table I). */
export function angleClass(ringSize: 0 | 3 | 4, classIJ: number, classJK: number): number {
  const joined = classIJ + classJK;
  switch (ringSize) {
    case 3:
      return joined === 0 ? 3 : joined + 4;
    case 4:
      return joined === 0 ? 4 : joined + 6;
    default:
      return joined;
  }
}

/** Stretch-bend class from the angle class and the class of bond i-j (part III, table II). */
export function stretchBendClass(angleClass: number, classIJ: number): number {
  switch (angleClass) {
    case 1:
      return classIJ === 1 ? 1 : 2;
    case 2:
      return 3;
    case 3:
      return 5;
    case 4:
      return 4;
    case 5:
      return classIJ === 1 ? 6 : 7;
    case 6:
      return 8;
    case 7:
      return classIJ === 1 ? 9 : 10;
    case 8:
      return 11;
    default:
      return 0;
  }
}

/**
 * The torsion classes to try, in this order (part IV): the one of a ring, the one of the bonds, and class 0, to which
 * RDKit and openchemlib both step down before they turn to the empirical rules.
 */
export function torsionClasses(
  structure: Structure,
  types: Readonly<Int32Array>,
  atoms: readonly [number, number, number, number],
  bondClasses: readonly [number, number, number],
  centralBond: number,
): readonly number[] {
  const [i, j, k, l] = atoms;
  const [classIJ, classJK, classKL] = bondClasses;
  const isSingle = structure.orders[centralBond] === 1 && !structure.aromaticBonds[centralBond];
  const plain = classJK === 0 && isSingle && (classIJ === 1 || classKL === 1) ? 2 : classJK;
  // Four atoms round a ring of two fused three-membered rings are no four-membered ring.
  if (areBonded(structure, i, l)) {
    return areBonded(structure, i, k) || areBonded(structure, j, l) ? [plain, 0] : [4, plain];
  }
  const inFiveRing = structure.neighbors[i].some(
    ({ atom }) => atom !== j && atom !== k && areBonded(structure, atom, l),
  );
  const isSaturated = atoms.some((atom) => types[atom] === AtomType.alkylCarbon);
  return plain === 0 && inFiveRing && isSaturated ? [5, 0] : [plain, 0];
}
