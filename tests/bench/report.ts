/** Pieces of the bench's report. */

/** kcal/mol within which two energies are the same minimum. */
const SAME_MINIMUM = 0.01;

/** Whether an energy is another's equal or lower. */
export function isNotAbove(ours: number, theirs: number): boolean {
  return ours - theirs <= SAME_MINIMUM;
}

/** How our energies compare with theirs, one by one: how many are lower, the same and higher, and the highest above. */
export function comparedEnergies(ours: readonly number[], theirs: readonly number[]): string {
  const above = ours.map((energy, n) => energy - theirs[n]);
  const lower = above.filter((difference) => difference < -SAME_MINIMUM).length;
  const higher = above.filter((difference) => difference > SAME_MINIMUM).length;
  const worst = Math.max(...above);
  return `${lower}/${above.length - lower - higher}/${higher} (${worst >= 0 ? '+' : ''}${worst.toFixed(4)})`;
}

/** What the column of `comparedEnergies` is called. */
export const ENERGIES_HEAD = 'energies lower/same/higher (highest above)';

/** How many times as fast, with two figures or whole. */
export function ratio(theirs: number, ours: number): string {
  const times = theirs / ours;
  return times >= 10 ? times.toFixed(0) : times.toPrecision(2);
}

/** A table in Markdown. */
export function markdownTable(
  head: readonly string[],
  rows: readonly (readonly string[])[],
): string {
  const line = (cells: readonly string[]): string => `| ${cells.join(' | ')} |`;
  return [line(head), line(head.map(() => '---')), ...rows.map(line)].join('\n');
}
