/**
 * The bonding picture that typing works on: bond orders and formal charges of the molecule brought to one convention,
 * whichever of the usual ones they were drawn in, with the small rings and their aromaticity.
 */
import type { Molecule } from '../molecule/molecule';
import { findAromaticRings } from './aromaticity';
import type { Bonding } from './bonding';
import { normalizeBonding } from './bonding-convention';
import { findSmallRings } from './small-rings';

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
