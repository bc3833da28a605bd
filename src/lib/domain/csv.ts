/** Comma-separated tables after RFC 4180 that a spreadsheet cannot mistake for formulas. */

export type Cell = string | number | boolean | null | undefined;

/** What a spreadsheet would run: OWASP, CSV Injection. */
const FORMULA_START = /^[=+\-@\t\r]/;

/** One line with its end. Numbers are written as they are; a text that looks like a formula gets an apostrophe before it. */
export function csvLine(cells: readonly Cell[]): string {
  return `${cells.map(csvCell).join(',')}\r\n`;
}

/** A whole table with its header. */
export function csvTable(header: readonly string[], rows: readonly (readonly Cell[])[]): string {
  return csvLine(header) + rows.map(csvLine).join('');
}

function csvCell(cell: Cell): string {
  if (cell === null || cell === undefined) return '';
  if (typeof cell !== 'string') return String(cell);
  const safe = FORMULA_START.test(cell) ? `'${cell}` : cell;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
