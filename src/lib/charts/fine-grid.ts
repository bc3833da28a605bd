/** A map's energies between its cells, smooth and never beyond the cells around. */
import { createPeriodicCurve } from '../engine/light';

/** Energies of cells, row by row: the first angle ascends by row and the second by column, over (-180, 180]. */
export interface MapEnergies {
  readonly perAxis: number;
  /** Degrees between two cells. */
  readonly step: number;
  /** Null where a cell was not computed. */
  readonly energies: readonly (number | null)[];
}

/** Energies on a finer grid that closes: both -180 and 180 are in it. */
export interface FineGrid {
  readonly perAxis: number;
  /** Degrees between two points. */
  readonly step: number;
  readonly at: (first: number, second: number) => number;
}

/** The angle of a place on a map's axis, degrees. */
export function axisAngle({ perAxis, step }: Pick<MapEnergies, 'perAxis' | 'step'>, n: number) {
  return 180 - step * (perAxis - 1 - n);
}

/** The cell nearest to two angles, degrees. */
export function cellAt(
  { perAxis, step }: Pick<MapEnergies, 'perAxis' | 'step'>,
  first: number,
  second: number,
): number {
  const place = (angle: number): number => {
    const turned = Math.round((angle + 180) / step) % perAxis;
    return (turned + 2 * perAxis - 1) % perAxis;
  };
  return place(first) * perAxis + place(second);
}

/**
 * Refines a map by monotone curves along rows and then along columns, so that no minimum or barrier appears that was not
 * computed. Cells that are missing are taken for as high as the highest.
 */
export function refine({ perAxis, step, energies }: MapEnergies, fineStep: number): FineGrid {
  const highest = Math.max(0, ...energies.flatMap((energy) => energy ?? []));
  const angles = Array.from({ length: perAxis }, (_, n) => axisAngle({ perAxis, step }, n));
  const fine = Math.round(360 / fineStep) + 1;
  const fineAngles = Array.from({ length: fine }, (_, n) => -180 + n * fineStep);
  const rows = angles.map((_, row) => {
    const curve = createPeriodicCurve(
      angles,
      energies.slice(row * perAxis, (row + 1) * perAxis).map((energy) => energy ?? highest),
    );
    return fineAngles.map((angle) => curve.at(angle));
  });
  const columns = fineAngles.map((_, column) => {
    const curve = createPeriodicCurve(
      angles,
      rows.map((row) => row[column]),
    );
    return fineAngles.map((angle) => curve.at(angle));
  });
  return { perAxis: fine, step: fineStep, at: (first, second) => columns[second][first] };
}
