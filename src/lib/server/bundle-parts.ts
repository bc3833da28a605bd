/** What the files of a bundle have in common. */
import { atomLabel, type Molecule } from '../engine';
import type { Answer } from './answers';

export interface BundleFile {
  readonly path: string;
  readonly content: string;
}

export interface BundledMolecule {
  readonly name: string;
  /** Folder of the molecule, safe and unique in the bundle. */
  readonly folder: string;
  readonly smiles: string;
  readonly molecule: Molecule;
  readonly answers: readonly Answer[];
}

/** Energies are written to a ten-thousandth; more digits would only pretend. */
export const energy = (value: number): string => value.toFixed(4);

/** An atom as bundles call it: element and number from 1. */
export function atomName(molecule: Molecule, atom: number): string {
  return atomLabel(molecule.atomicNumbers[atom], atom);
}
