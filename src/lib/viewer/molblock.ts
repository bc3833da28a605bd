/** A skeleton with a geometry as a V2000 connection table, the form in which the 3-D view takes a structure. */
import type { Skeleton } from './internal-coordinates';

const field = (value: number, width: number, digits = 0): string =>
  value.toFixed(digits).padStart(width);

/** Writes atoms and bonds; coordinates in Å, 3N. Up to 999 atoms. */
export function molblock({ symbols, bonds }: Skeleton, x: ArrayLike<number>): string {
  const atoms = symbols.map((symbol, n) => {
    const place = [0, 1, 2].map((axis) => field(x[3 * n + axis], 10, 4)).join('');
    return `${place} ${symbol.padEnd(3)} 0  0  0  0  0  0  0  0  0  0  0  0`;
  });
  const links = bonds.map(
    ([a, b, order]) => `${field(a + 1, 3)}${field(b + 1, 3)}${field(order, 3)}  0`,
  );
  const counts = `${field(symbols.length, 3)}${field(bonds.length, 3)}  0  0  0  0  0  0  0  0999 V2000`;
  return ['', '', '', counts, ...atoms, ...links, 'M  END', ''].join('\n');
}
