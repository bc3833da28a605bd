/** What a SMILES or a molfile says, before valences are filled and stereo is understood. */

/** An atom as written. */
export interface RawAtom {
  atomicNumber: number;
  charge: number;
  /** Mass number of a named isotope, 0 for none. */
  massNumber: number;
  /** Hydrogens the text states besides atoms of its own; null when the valence decides. */
  hydrogens: number | null;
  /** Written as part of an aromatic system (lower case in SMILES). */
  aromatic: boolean;
  /** Line of the text, from 1; 0 where the text has only one. */
  line: number;
}

/** A bond as written; 4 stands for aromatic until the double bonds are placed. */
export interface RawBond {
  a: number;
  b: number;
  order: 1 | 2 | 3 | 4;
}

/** A tetrahedral centre as written; -1 stands for the implicit hydrogen or the lone pair. */
export interface RawCenter {
  atom: number;
  neighbors: [number, number, number, number];
  clockwise: boolean;
}

/** A double bond with a known configuration: a-b=c-d. */
export interface RawDoubleBond {
  atoms: [number, number, number, number];
  cis: boolean;
}

/** The tables of one structure. */
export interface RawMolecule {
  name: string;
  atoms: RawAtom[];
  bonds: RawBond[];
  centers: RawCenter[];
  doubleBonds: RawDoubleBond[];
}
