import { describe, expect, it } from 'vitest';
import { gridMinima, lowestPath } from './path';

function gridOf(rows: number[][]) {
  return { rows: rows.length, columns: rows[0].length, energies: Float64Array.from(rows.flat()) };
}

describe('gridMinima', () => {
  it('finds the wells, lowest first, across the seam too', () => {
    const grid = gridOf([
      [5, 9, 9, 9, 9],
      [9, 9, 2, 9, 9],
      [9, 9, 9, 9, 9],
      [9, 9, 9, 9, 4],
    ]);
    // Cell 0 (5) touches cell 19 (4) over the corner of the seam, so it is no well of its own.
    expect(gridMinima(grid)).toEqual([7, 19]);
  });

  it('counts a level floor once', () => {
    expect(gridMinima(gridOf([[1, 1, 3, 3, 3, 2, 3, 3]]))).toEqual([0, 5]);
  });
});

describe('lowestPath', () => {
  it('goes round over the low pass instead of straight over the high one', () => {
    const grid = gridOf([
      [9, 9, 9, 9, 9, 9],
      [9, 0, 8, 1, 9, 9],
      [9, 3, 9, 3, 9, 9],
      [9, 3, 4, 3, 9, 9],
      [9, 9, 9, 9, 9, 9],
    ]);
    const path = lowestPath(grid, 7, 9);
    expect(path.cells).toEqual([7, 13, 19, 20, 21, 15, 9]);
    expect(path.pass).toBe(20);
    expect(path.passEnergy).toBe(4);
  });

  it('uses the seam where that is lower', () => {
    const path = lowestPath(gridOf([[0, 9, 9, 1, 2]]), 0, 3);
    expect(path.cells).toEqual([0, 4, 3]);
    expect(path.passEnergy).toBe(2);
  });

  it('stays where it is when start and end are one cell', () => {
    expect(lowestPath(gridOf([[3, 1, 2]]), 1, 1)).toEqual({ cells: [1], pass: 1, passEnergy: 1 });
  });
});
