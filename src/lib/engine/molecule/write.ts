/** Writes geometries as MOL and SDF files (V2000, CTfile formats). */
import { ELEMENT_SYMBOLS } from './elements';
import type { Molecule } from './molecule';

/** The two free lines of a molfile's header. */
export interface MolfileHeader {
  /** First line; the molecule's name by default. */
  readonly title?: string;
  /** Third line. */
  readonly comment?: string;
}

/** One record of an SDF file. */
export interface SdfRecord extends MolfileHeader {
  readonly molecule: Molecule;
  readonly coordinates: Readonly<Float64Array>;
  /** Data fields in the order they are written. */
  readonly data?: Readonly<Record<string, string | number>>;
}

/**
 * A 3-D geometry (Å, 3N) as a V2000 molfile: all atoms in their order, charges and isotopes in M lines. The
 * configuration is in the coordinates, so bonds carry no stereo marks.
 */
export function writeMolfile(
  molecule: Molecule,
  coordinates: Readonly<Float64Array>,
  { title = molecule.name, comment = '' }: MolfileHeader = {},
): string {
  const { atomCount, bonds } = molecule;
  const chiral = molecule.stereocenters.length > 0 ? 1 : 0;
  const lines = [
    headerLine(title),
    '  Windlass          3D',
    headerLine(comment),
    `${integer(atomCount)}${integer(bonds.length)}  0  0${integer(chiral)}  0            999 V2000`,
  ];
  for (let atom = 0; atom < atomCount; atom++) {
    const place = [0, 1, 2].map((axis) => decimal(coordinates[3 * atom + axis])).join('');
    const symbol = ELEMENT_SYMBOLS[molecule.atomicNumbers[atom]].padEnd(3);
    lines.push(`${place} ${symbol} 0${'  0'.repeat(11)}`);
  }
  for (const { a, b, order } of bonds) {
    lines.push(`${integer(a + 1)}${integer(b + 1)}${integer(order)}  0`);
  }
  lines.push(...propertyLines('CHG', molecule.formalCharges));
  lines.push(...propertyLines('ISO', molecule.massNumbers));
  lines.push('M  END', '');
  return lines.join('\n');
}

/** Several geometries with data fields as an SDF file. */
export function writeSdf(records: readonly SdfRecord[]): string {
  return records
    .map((record) => {
      const fields = Object.entries(record.data ?? {}).map(([name, value]) => {
        // A blank line ends a field, and angle brackets end its name.
        const text = String(value)
          .replace(/\r/g, '')
          .replace(/\n\s*\n/g, '\n')
          .trim();
        return `>  <${name.replace(/[<>\s]+/g, '_')}>\n${text}\n\n`;
      });
      const molfile = writeMolfile(record.molecule, record.coordinates, record);
      return `${molfile}${fields.join('')}$$$$\n`;
    })
    .join('');
}

/** A header line holds 80 characters and cannot contain a line break. */
function headerLine(text: string): string {
  return text.replace(/\s+/g, ' ').trim().slice(0, 80);
}

function integer(value: number): string {
  return String(value).padStart(3);
}

/** A coordinate in its ten columns; a negative zero would only confuse comparisons. */
function decimal(value: number): string {
  return (Math.round(value * 1e4) / 1e4 + 0).toFixed(4).padStart(10);
}

/** M lines with up to eight atoms each for the values that are not 0. */
function propertyLines(key: string, values: ArrayLike<number>): string[] {
  const entries: string[] = [];
  for (let atom = 0; atom < values.length; atom++) {
    if (values[atom] === 0) continue;
    entries.push(` ${integer(atom + 1)} ${integer(values[atom])}`);
  }
  const lines: string[] = [];
  for (let n = 0; n < entries.length; n += 8) {
    const part = entries.slice(n, n + 8);
    lines.push(`M  ${key}${integer(part.length)}${part.join('')}`);
  }
  return lines;
}
