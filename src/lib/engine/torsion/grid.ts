/** The grid of a scan over one or two torsions, folded by the molecule's symmetry onto the cells that must be computed. */
import { InputError } from '../errors';
import { turnBetween, wrapDegrees } from '../units';
import { applySymmetry, inverseSymmetry } from './scan-symmetry';
import type { ExactSymmetry } from './scan-symmetry';

/** A grid of one or two periodic axes. Cells are numbered row by row: cell = row * perAxis + column. */
export interface ScanGrid {
  readonly axes: 1 | 2;
  readonly perAxis: number;
  /** Degrees between neighboring cells. */
  readonly step: number;
  readonly cellCount: number;
  /** Target angles of a cell, one an axis, degrees ascending over (-180, 180]. */
  angles(cell: number): readonly number[];
  /** The cell nearest to some angles. */
  nearest(angles: readonly number[]): number;
  /** The cell that is computed in place of this one. */
  representative(cell: number): number;
  /** Turns a geometry of a cell's representative into one of the cell, or back; the same array where nothing changes. */
  unfold(cell: number, x: Float64Array): Float64Array;
  fold(cell: number, x: Float64Array): Float64Array;
  /** Cells that differ by one step of one axis. */
  neighbors(cell: number): readonly number[];
}

/** Refuses steps that do not divide the circle, and grids that would never end. */
export function checkStep(step: number, smallest: number): void {
  const count = 360 / step;
  if (!(step >= smallest && step <= 120) || Math.abs(count - Math.round(count)) > 1e-9) {
    throw new InputError(
      'bad-setting',
      `The step must divide 360 degrees and lie between ${smallest} and 120; it is ${step}.`,
    );
  }
}

/** Lays the grid; `symmetries` are a group without its identity. */
export function createGrid(
  axes: 1 | 2,
  step: number,
  symmetries: readonly ExactSymmetry[],
): ScanGrid {
  const perAxis = Math.round(360 / step);
  const cellCount = perAxis ** axes;
  const axisAngles = Array.from({ length: perAxis }, (_, n) => 180 - step * (perAxis - 1 - n));
  const angles = (cell: number): number[] =>
    axes === 1
      ? [axisAngles[cell]]
      : [axisAngles[Math.floor(cell / perAxis)], axisAngles[cell % perAxis]];
  const nearest = (wanted: readonly number[]): number =>
    wanted.reduce((cell, angle) => {
      const turns = Math.round(turnBetween(180, angle) / step);
      return cell * perAxis + ((turns + 2 * perAxis - 1) % perAxis);
    }, 0);

  const representatives = new Int32Array(cellCount).fill(-1);
  const folding = new Array<ExactSymmetry | null>(cellCount).fill(null);
  // From the far end, so that a mirrored axis is computed over 0 to 180.
  for (let cell = cellCount - 1; cell >= 0; cell--) {
    if (representatives[cell] !== -1) continue;
    representatives[cell] = cell;
    for (const symmetry of symmetries) {
      const own = angles(cell);
      const image = nearest(symmetry.from.map((t) => wrapDegrees(symmetry.sign * own[t])));
      if (representatives[image] !== -1) continue;
      representatives[image] = cell;
      folding[image] = symmetry;
    }
  }
  const transformed = (x: Float64Array, cell: number, back: boolean): Float64Array => {
    const symmetry = folding[cell];
    if (!symmetry) return x;
    const out = new Float64Array(x.length);
    applySymmetry(back ? inverseSymmetry(symmetry) : symmetry, x, out);
    return out;
  };
  const neighbors = (cell: number): number[] => {
    const around: number[] = [];
    for (const stride of axes === 1 ? [1] : [perAxis, 1]) {
      const position = Math.floor(cell / stride) % perAxis;
      for (const turn of [1, perAxis - 1]) {
        around.push(cell + (((position + turn) % perAxis) - position) * stride);
      }
    }
    return around;
  };
  return {
    axes,
    perAxis,
    step,
    cellCount,
    angles,
    nearest,
    representative: (cell) => representatives[cell],
    unfold: (cell, x) => transformed(x, cell, false),
    fold: (cell, x) => transformed(x, cell, true),
    neighbors,
  };
}
