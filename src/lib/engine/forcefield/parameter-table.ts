/** Reading openchemlib's MMFF94 tables: comma-separated rows behind one line of row count and one of column types. */
import { resourceTable } from '../molecule/resources';

/** The rows of one table, e.g. `bond.csv`; quoted letters stay text, everything else becomes a number. */
export function readTable(name: string): (number | string)[][] {
  const lines = resourceTable(`/resources/forcefield/mmff94/${name}`)
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '');
  const rows = lines.slice(2).map((line) => line.split(',').map(readField));
  if (rows.length !== Number(lines[0])) {
    throw new Error(`${name} has ${rows.length} rows, but says ${lines[0]}`);
  }
  return rows;
}

/** The rows of a table that holds nothing but numbers. */
export function readNumericTable(name: string): number[][] {
  return readTable(name) as number[][];
}

function readField(field: string): number | string {
  return field.startsWith("'") ? field.slice(1, -1) : Number(field);
}

/** One key for a few small integers: types up to 99, bond, angle and torsion classes up to 11. */
export function tableKey(a: number, b = 0, c = 0, d = 0, e = 0): number {
  return (((a * 128 + b) * 128 + c) * 128 + d) * 128 + e;
}
