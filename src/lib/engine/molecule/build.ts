/** The one place where a Molecule is put together from plain tables. */
import type { InputWarning } from '../errors';
import type { Bond, Molecule, Neighbor, Stereobond, Stereocenter } from './molecule';
import { findRingBonds, findRings } from './rings';

/** The tables of a molecule; what is left out is empty, neutral, natural or unknown. Several parts are allowed. */
export interface MoleculeParts {
  readonly name?: string;
  readonly atomicNumbers: ArrayLike<number>;
  readonly formalCharges?: ArrayLike<number>;
  readonly massNumbers?: ArrayLike<number>;
  readonly bonds: readonly Bond[];
  readonly givenAtomCount?: number;
  readonly stereocenters?: readonly Stereocenter[];
  readonly stereobonds?: readonly Stereobond[];
  /** 3N, Å. */
  readonly coordinates?: ArrayLike<number> | null;
  readonly smiles?: string;
  readonly warnings?: readonly InputWarning[];
}

/**
 * Builds a frozen molecule, with neighbor lists and rings, from its tables. It trusts chemistry to its caller and
 * only checks that the tables fit together; a mistake there is a bug and throws plainly.
 */
export function createMolecule(parts: MoleculeParts): Molecule {
  const atomCount = parts.atomicNumbers.length;
  checkLength('formalCharges', parts.formalCharges, atomCount);
  checkLength('massNumbers', parts.massNumbers, atomCount);
  checkLength('coordinates', parts.coordinates, 3 * atomCount);
  const bonds = parts.bonds.map(({ a, b, order }) => Object.freeze({ a, b, order }));
  const neighbors = findNeighbors(atomCount, bonds);
  const ringBonds = findRingBonds(neighbors, bonds);
  return Object.freeze({
    name: parts.name ?? '',
    atomCount,
    givenAtomCount: parts.givenAtomCount ?? atomCount,
    atomicNumbers: Uint8Array.from(parts.atomicNumbers),
    formalCharges: Int8Array.from(parts.formalCharges ?? new Int8Array(atomCount)),
    massNumbers: Uint16Array.from(parts.massNumbers ?? new Uint16Array(atomCount)),
    bonds: Object.freeze(bonds),
    neighbors,
    rings: Object.freeze(findRings(neighbors, bonds, ringBonds).map((ring) => Object.freeze(ring))),
    ringBonds,
    stereocenters: Object.freeze([...(parts.stereocenters ?? [])]),
    stereobonds: Object.freeze([...(parts.stereobonds ?? [])]),
    coordinates: parts.coordinates ? Float64Array.from(parts.coordinates) : null,
    smiles: parts.smiles ?? '',
    warnings: Object.freeze([...(parts.warnings ?? [])]),
  });
}

function checkLength(
  table: string,
  values: ArrayLike<number> | null | undefined,
  expected: number,
): void {
  if (values && values.length !== expected) {
    throw new Error(`${table} has ${values.length} entries, expected ${expected}`);
  }
}

/** Neighbor lists in the order of the bond table. */
function findNeighbors(
  atomCount: number,
  bonds: readonly Bond[],
): readonly (readonly Neighbor[])[] {
  const neighbors: Neighbor[][] = Array.from({ length: atomCount }, () => []);
  bonds.forEach(({ a, b }, bond) => {
    if (a === b || !(a in neighbors) || !(b in neighbors)) {
      throw new Error(`bond ${bond} joins atoms ${a} and ${b} of ${atomCount}`);
    }
    if (neighbors[a].some(({ atom }) => atom === b)) {
      throw new Error(`bond ${bond} joins atoms ${a} and ${b} a second time`);
    }
    neighbors[a].push(Object.freeze({ atom: b, bond }));
    neighbors[b].push(Object.freeze({ atom: a, bond }));
  });
  return Object.freeze(neighbors.map((list) => Object.freeze(list)));
}
