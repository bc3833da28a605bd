/** The distorted geometries recorded by data/distorted-geometries.py, and the few of them that we refuse. */
import { readFileSync } from 'node:fs';
import type { TermEnergies } from '$lib/engine/forcefield/forcefield';

export interface RecordedEnergies {
  total: number;
  terms: TermEnergies;
  types: number[];
  charges: number[];
}

export interface RecordedMolecule {
  name: string;
  smiles: string;
  molfile: string;
  /** 3N, Å; the molfile has four decimals of them. */
  coordinates: number[];
  MMFF94: RecordedEnergies;
  MMFF94s: RecordedEnergies;
}

export const { molecules: recordedMolecules } = JSON.parse(
  readFileSync(new URL('./data/distorted-geometries.json', import.meta.url), 'utf8'),
) as { molecules: RecordedMolecule[] };

/** What RDKit and openchemlib compute and we refuse, because MMFF94 has no type for it: molecule and reason. */
export const refusedMolecules: Record<string, string> = {
  'sulfur dioxide': 'the only two-coordinate sulfur with double bonds in MMFF94 is that of C=S=O',
  'N-sulfinylaniline':
    'the only two-coordinate sulfur with double bonds in MMFF94 is that of C=S=O',
  trimethylsulfonium: 'no sulfonium type; RDKit gives the cation a total charge of 0',
  tetramethylphosphonium: 'no charged phosphonium type; RDKit gives the cation a total charge of 0',
};

/** The molecules MMFF94 covers. */
export const coveredMolecules = recordedMolecules.filter(({ name }) => !(name in refusedMolecules));
