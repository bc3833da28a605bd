/** The bonding picture of a molecule, and what can be asked of it. */
import type { Neighbor } from '../molecule/molecule';

/** Bond orders and formal charges in the convention of `normalizeBonding`. */
export interface Bonding {
  readonly elements: Readonly<Uint8Array>;
  readonly charges: Int8Array;
  /** One an entry of molecule.bonds. */
  readonly orders: Uint8Array;
  readonly neighbors: readonly (readonly Neighbor[])[];
}

/** Number of bonded atoms. */
export function coordination(bonding: Bonding, atom: number): number {
  return bonding.neighbors[atom].length;
}

/** True when two atoms are bonded. */
export function areBonded(bonding: Bonding, i: number, j: number): boolean {
  return bonding.neighbors[i].some(({ atom }) => atom === j);
}

/** Atoms bonded to `atom` by a bond of the given order. */
export function bondedBy(bonding: Bonding, atom: number, order: number): number[] {
  return bonding.neighbors[atom]
    .filter(({ bond }) => bonding.orders[bond] === order)
    .map((neighbor) => neighbor.atom);
}

/** True when the atom has a double bond to one of the elements. */
export function hasDoubleTo(bonding: Bonding, atom: number, ...elements: number[]): boolean {
  return bondedBy(bonding, atom, 2).some((other) => elements.includes(bonding.elements[other]));
}

/** Neighbors that bear nothing else, of one of the elements. */
export function terminalNeighbors(bonding: Bonding, atom: number, ...elements: number[]): number[] {
  return bonding.neighbors[atom]
    .map((neighbor) => neighbor.atom)
    .filter(
      (other) => coordination(bonding, other) === 1 && elements.includes(bonding.elements[other]),
    );
}
