/** Rows of a table in the order a person asked for. */

/** What a column sorts by. */
export type SortKey = number | string | null;

export interface Sorting<Column extends string> {
  readonly column: Column;
  readonly descending: boolean;
}

/** Sorted rows: equal ones keep their order, and what has no value stands last, whichever way. */
export function sortedBy<Row>(
  rows: readonly Row[],
  keyOf: (row: Row) => SortKey,
  descending: boolean,
): Row[] {
  const direction = descending ? -1 : 1;
  return [...rows].sort((one, other) => {
    const [a, b] = [keyOf(one), keyOf(other)];
    if (a === null || b === null) return Number(a === null) - Number(b === null);
    if (typeof a === 'string' || typeof b === 'string') {
      return direction * String(a).localeCompare(String(b), 'en', { numeric: true });
    }
    return direction * (a - b);
  });
}

/** The sorting after a click on a column: the other way round where it is sorted by it already. */
export function sortedNext<Column extends string>(
  { column, descending }: Sorting<Column>,
  clicked: Column,
): Sorting<Column> {
  return { column: clicked, descending: clicked === column && !descending };
}
