/** The lowest way between two minima of a map of two bonds. */
import { lowestPath } from '../engine/light';

/** A map as pages hold it: energies in kcal/mol above the lowest, row by row, null where a cell was not reached. */
export interface MapWithMinima {
  readonly perAxis: number;
  readonly energies: readonly (number | null)[];
  readonly minima: readonly { readonly cell: number; readonly relative: number }[];
}

/** The letter of a minimum, the lowest first: A, B, … Z, A2, … */
export function minimumName(n: number): string {
  const letter = String.fromCharCode(65 + (n % 26));
  return n < 26 ? letter : `${letter}${Math.floor(n / 26) + 1}`;
}

/** The lowest way between two minima by their places in the list; null where there is none. */
export function wayBetween(map: MapWithMinima, from: number, to: number) {
  const [start, end] = [map.minima.at(from), map.minima.at(to)];
  if (!start || !end || start.cell === end.cell) return null;
  const energies = map.energies.map((energy) => energy ?? Infinity);
  const grid = { rows: map.perAxis, columns: map.perAxis, energies };
  const { cells, pass, passEnergy } = lowestPath(grid, start.cell, end.cell);
  if (!Number.isFinite(passEnergy)) return null;
  return {
    cells,
    pass,
    from: minimumName(from),
    to: minimumName(to),
    /** kcal/mol above either end. */
    up: passEnergy - start.relative,
    back: passEnergy - end.relative,
  };
}
