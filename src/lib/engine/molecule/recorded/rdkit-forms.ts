/** The recorded molecules, see record-rdkit-forms.py. */
import { readFileSync } from 'node:fs';

export interface RecordedMolecule {
  readonly name: string;
  readonly smiles: readonly string[];
  readonly drawings: readonly string[];
  readonly geometry: string;
  readonly heavyGeometry: string;
  readonly atoms: number;
  readonly formula: string;
  readonly weight: number;
  readonly centers: number;
  readonly doubleBonds: number;
}

/** Reads the file and says which RDKit wrote it. */
export function readRecordedMolecules(): { rdkit: string; molecules: RecordedMolecule[] } {
  const url = new URL('./rdkit-forms.json', import.meta.url);
  return JSON.parse(readFileSync(url, 'utf8')) as { rdkit: string; molecules: RecordedMolecule[] };
}
