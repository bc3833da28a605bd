/** The molecule as every other room of the engine sees it: frozen, complete with hydrogens, valid by construction. */
import type { InputWarning } from '../errors';

/** A bond in a Kekulé structure. */
export interface Bond {
  readonly a: number;
  readonly b: number;
  readonly order: 1 | 2 | 3;
}

/** One end of a bond, seen from the atom at the other end. */
export interface Neighbor {
  readonly atom: number;
  readonly bond: number;
}

/**
 * A tetrahedral stereocentre with a known configuration. Seen from the first of `neighbors`, the other three run
 * clockwise when `clockwise` is true; a lone pair, where there is one, is the last and written as -1.
 */
export interface Stereocenter {
  readonly atom: number;
  readonly neighbors: readonly [number, number, number, number];
  readonly clockwise: boolean;
}

/** A double bond b=c with a known configuration: a-b=c-d is cis or trans. */
export interface Stereobond {
  readonly bond: number;
  readonly atoms: readonly [number, number, number, number];
  readonly cis: boolean;
}

/** A molecule with all its hydrogens: atoms as given first, added hydrogens after them. */
export interface Molecule {
  readonly name: string;
  readonly atomCount: number;
  /** How many of the atoms were in the input; the rest are added hydrogens. */
  readonly givenAtomCount: number;
  readonly atomicNumbers: Readonly<Uint8Array>;
  readonly formalCharges: Readonly<Int8Array>;
  /** Mass number of a named isotope; 0 for the natural mixture. */
  readonly massNumbers: Readonly<Uint16Array>;
  readonly bonds: readonly Bond[];
  readonly neighbors: readonly (readonly Neighbor[])[];
  /** Smallest set of smallest rings, each as its atoms in order round the ring. */
  readonly rings: readonly (readonly number[])[];
  /** Per bond: 1 when the bond is in a ring (of any size). */
  readonly ringBonds: Readonly<Uint8Array>;
  readonly stereocenters: readonly Stereocenter[];
  readonly stereobonds: readonly Stereobond[];
  /** The 3-D geometry as given, with added hydrogens placed; null where the input had none. */
  readonly coordinates: Readonly<Float64Array> | null;
  /** Canonical isomeric SMILES without explicit hydrogens. */
  readonly smiles: string;
  readonly warnings: readonly InputWarning[];
}

/** The index of the bond between two atoms, -1 where there is none. */
export function bondBetween(molecule: Molecule, a: number, b: number): number {
  const neighbor = molecule.neighbors[a].find(({ atom }) => atom === b);
  return neighbor ? neighbor.bond : -1;
}
