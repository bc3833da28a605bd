/** The door into the engine: text in, a complete and checked molecule out. */
import { InputError } from '../errors';
import { completeAtoms, finishMolecule, statedConfiguration } from './complete';
import { keepLargestPart } from './largest-part';
import type { Molecule } from './molecule';
import { readMolfile } from './read-molfile';
import { parseSmiles } from './smiles';
import { refuseSmallTransRings } from './stereo-limits';

export { splitRecords } from './molfile';

/** Longest text that is looked at; 200 atoms take far less. */
const LONGEST_TEXT = 1_000_000;

/** A structure as people send it. */
export type MoleculeInput = { readonly smiles: string } | { readonly molfile: string };

export interface ReadOptions {
  /** Of a salt or mixture, read the largest part alone; otherwise several parts are an error. */
  readonly largestPart?: boolean;
}

/**
 * Reads a SMILES (a name may follow after a space) or the first record of a MOL or SDF file (V2000, V3000). Atoms keep
 * their order; hydrogens that are missing come after them. Throws InputError for everything a person can mend.
 */
export function readMolecule(
  input: MoleculeInput,
  { largestPart = false }: ReadOptions = {},
): Molecule {
  if ('smiles' in input) return readSmiles(checkText(input.smiles), largestPart);
  return readMolfile(checkText(input.molfile), largestPart);
}

function checkText(text: unknown): string {
  if (typeof text !== 'string' || text.trim() === '') {
    throw new InputError('empty-input', 'There is no structure in the input.');
  }
  if (text.length > LONGEST_TEXT) {
    throw new InputError('too-large', 'The input is too long for a molecule of 200 atoms.');
  }
  // eslint-disable-next-line no-control-regex
  if (/[\u0000-\u0008\u000e-\u001f\ufffd]/.test(text)) {
    throw new InputError('unreadable', 'The input is not text; it may be a binary file.');
  }
  return text;
}

function readSmiles(text: string, largestPart: boolean): Molecule {
  const lines = text.split(/\r\n|\r|\n/).filter((line) => line.trim() !== '');
  if (lines.length > 1) {
    throw new InputError('unreadable', 'The input has several lines; one SMILES is needed.', {
      line: 2,
    });
  }
  const [, structure, rest] = /^\s*(\S+)\s*(.*?)\s*$/.exec(lines[0]) ?? [];
  if (rest.startsWith('|')) {
    throw new InputError(
      'query-feature',
      'The part between bars after the SMILES is an extension that is not read; leave it out.',
    );
  }
  const written = parseSmiles(structure);
  const raw = largestPart ? keepLargestPart(written) : written;
  raw.name = rest;
  const completed = completeAtoms(raw);
  const { centers, doubleBonds } = statedConfiguration(completed, raw);
  refuseSmallTransRings(completed.molecule, doubleBonds);
  return finishMolecule(completed, centers, doubleBonds, null);
}
