/** Stored maps of two bonds, read back whole. */
import type { maps } from './db/schema';
import { unpack } from './packing';

/** A cell of a map; energies and geometry are null where time ran out before it was reached. */
export interface StoredCell {
  /** Target angles, degrees. */
  readonly angles: readonly [number, number];
  readonly energy: number | null;
  /** kcal/mol above the lowest cell or minimum. */
  readonly relative: number | null;
  readonly coordinates: Float64Array | null;
}

/** A free minimum of a map. */
export interface StoredMapMinimum {
  /** Degrees, of the geometry itself. */
  readonly angles: readonly [number, number];
  readonly energy: number;
  /** kcal/mol above the lowest cell or minimum. */
  readonly relative: number;
  /** The cell nearest to it. */
  readonly cell: number;
  readonly coordinates: Float64Array;
}

export interface StoredMap {
  readonly torsions: readonly [readonly number[], readonly number[]];
  /** Degrees between two cells, and cells along each side. */
  readonly step: number;
  readonly perAxis: number;
  /** Row by row: the first torsion ascends by row and the second by column, over (-180, 180]. */
  readonly cells: readonly StoredCell[];
  /** Lowest first. */
  readonly minima: readonly StoredMapMinimum[];
}

/** A map of its row; null without one. */
export function toMap(
  row: typeof maps.$inferSelect | undefined,
  atomCount: number,
): StoredMap | null {
  if (!row) return null;
  const energies = row.energies as readonly (number | null)[];
  const minima = row.minima as readonly Pick<StoredMapMinimum, 'angles' | 'energy' | 'cell'>[];
  const geometries = unpack(row.coordinates, atomCount);
  const reached = energies.flatMap((energy) => energy ?? []);
  // One zero for all: a free minimum lies a little below the cell beside it.
  const lowest = Math.min(...reached, ...minima.map(({ energy }) => energy));
  const angleOf = (place: number): number => 180 - row.step * (row.perAxis - 1 - place);
  let read = 0;
  return {
    torsions: row.torsions as StoredMap['torsions'],
    step: row.step,
    perAxis: row.perAxis,
    cells: energies.map((energy, cell) => ({
      angles: [angleOf(Math.floor(cell / row.perAxis)), angleOf(cell % row.perAxis)],
      energy,
      relative: energy === null ? null : energy - lowest,
      coordinates: energy === null ? null : geometries[read++],
    })),
    minima: minima.map((minimum, n) => ({
      ...minimum,
      relative: minimum.energy - lowest,
      coordinates: geometries[reached.length + n],
    })),
  };
}
