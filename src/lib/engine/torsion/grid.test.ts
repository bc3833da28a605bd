import { describe, expect, it } from 'vitest';
import { createGrid } from './grid';
import type { ExactSymmetry } from './scan-symmetry';

const identity = Int32Array.of(0);
const mirror: ExactSymmetry = { source: identity, mirror: true, from: [0], sign: -1 };

describe('createGrid', () => {
  it('covers (-180, 180] in ascending order', () => {
    const grid = createGrid(1, 90, []);
    expect([0, 1, 2, 3].map((cell) => grid.angles(cell)[0])).toEqual([-90, 0, 90, 180]);
    expect(grid.neighbors(3)).toEqual([0, 2]);
    expect(grid.nearest([-179])).toBe(3);
    expect(grid.nearest([-46])).toBe(0);
    expect(grid.nearest([44])).toBe(1);
  });

  it('computes one half of a mirrored axis', () => {
    const grid = createGrid(1, 30, [mirror]);
    const computed = new Set(Array.from({ length: 12 }, (_, cell) => grid.representative(cell)));
    expect([...computed].map((cell) => grid.angles(cell)[0]).sort((a, b) => a - b)).toEqual([
      0, 30, 60, 90, 120, 150, 180,
    ]);
    const cell = grid.nearest([-60]);
    expect(grid.angles(grid.representative(cell))).toEqual([60]);
    const x = Float64Array.of(1, 2, 3);
    expect(grid.unfold(cell, x)).toEqual(Float64Array.of(1, 2, -3));
    expect(grid.fold(cell, grid.unfold(cell, x))).toEqual(x);
    expect(grid.unfold(grid.representative(cell), x)).toBe(x);
  });

  it('numbers a map row by row and closes it both ways', () => {
    const grid = createGrid(2, 120, []);
    expect(Array.from({ length: 9 }, (_, cell) => grid.angles(cell))).toEqual([
      [-60, -60],
      [-60, 60],
      [-60, 180],
      [60, -60],
      [60, 60],
      [60, 180],
      [180, -60],
      [180, 60],
      [180, 180],
    ]);
    expect([...grid.neighbors(0)].sort()).toEqual([1, 2, 3, 6]);
    expect(grid.nearest([61, -178])).toBe(5);
  });
});
