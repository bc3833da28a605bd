/**
 * The bonding picture that typing works on: bond orders and formal charges of the molecule brought to one convention,
 * whichever of the usual ones they were drawn in, with the small rings and their aromaticity.
 */
import type { Molecule, Neighbor } from '../molecule/molecule';
import { findAromaticRings } from './aromaticity';
import { normalizeBonding } from './bonding';
import { findSmallRings } from './small-rings';

/** Bond orders and formal charges in the convention of `normalizeBonding`. */
export interface Bonding {
  readonly elements: Readonly<Uint8Array>;
  readonly charges: Int8Array;
  /** One an entry of molecule.bonds. */
  readonly orders: Uint8Array;
  readonly neighbors: readonly (readonly Neighbor[])[];
}

export interface Structure extends Readonly<Bonding> {
  readonly molecule: Molecule;
  /** Relevant cycles of three to six atoms. */
  readonly rings: readonly (readonly number[])[];
  readonly aromaticRings: readonly (readonly number[])[];
  /** Per bond: 1 when it is an edge of an aromatic ring. */
  readonly aromaticBonds: Readonly<Uint8Array>;
}

/** Perceives the structure of a molecule for typing. */
export function perceiveStructure(molecule: Molecule): Structure {
  const bonding = normalizeBonding(molecule);
  const rings = findSmallRings(molecule);
  const { aromaticRings, aromaticBonds } = findAromaticRings(bonding, rings);
  return { ...bonding, molecule, rings, aromaticRings, aromaticBonds };
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

/** True when the atom is in an aromatic ring of the given size. */
export function inAromaticRing(structure: Structure, atom: number, size?: number): boolean {
  return structure.aromaticRings.some(
    (ring) => ring.includes(atom) && (size === undefined || ring.length === size),
  );
}

/** True when the atom is in a ring of the given size. */
export function inRingOfSize(structure: Structure, atom: number, size: number): boolean {
  return structure.rings.some((ring) => ring.length === size && ring.includes(atom));
}
