/** Reads the connection table of a molfile (CTfile formats, V2000 and V3000) to the letter, with line numbers. */
import { InputError } from '../errors';
import type { RawMolfile } from './connection-table';
import { readV2000 } from './molfile-v2000';
import { readV3000 } from './molfile-v3000';

/** The records of an SDF text, one molfile with its data each; records without content are left out. */
export function splitRecords(text: string): string[] {
  return text.split(/^\$\$\$\$.*(?:\r\n|\r|\n|$)/m).filter((record) => record.trim() !== '');
}

/** Parses the first record. Every fault is an InputError that names the line. */
export function parseMolfile(text: string): RawMolfile {
  const lines = text.split(/\r\n|\r|\n/);
  const end = lines.findIndex((line) => line.startsWith('$$$$'));
  if (end >= 0) lines.length = end;
  const counts = lines[3] ?? '';
  const version = /V([23])000/i.exec(counts)?.[1];
  if (!version && !/^[ \d]{3}[ \d]{2}\d/.test(counts)) {
    const elsewhere = lines.findIndex((line) => /V[23]000\s*$/.test(line));
    throw new InputError(
      'unreadable',
      elsewhere >= 0
        ? `The counts line of a molfile is its fourth line, after three header lines; here it is line ${elsewhere + 1}.`
        : 'The input is no molfile: the fourth line should say how many atoms and bonds there are.',
      { line: elsewhere >= 0 ? elsewhere + 1 : Math.min(4, lines.length) },
    );
  }
  const table = version === '3' ? readV3000(lines) : readV2000(lines);
  table.molecule.name = lines[0].trim();
  return { ...table, dimensions: lines[1].slice(20, 22).toUpperCase() };
}
