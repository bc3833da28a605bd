/**
 * Wave-front propagation over a grid: the best geometries of every cell are starts for its neighbors, again and again
 * until nothing drops (after Qiu et al., J. Chem. Phys. 2020, 152, 244116). The result does not depend on where a scan
 * begins or which way it turns. Each cell keeps several families of geometries, not one, so that a family that is second here
 * and best three cells on is carried there.
 */
import type { Control } from '../control';

/** What the waves run over. `Geometry` is anything with an energy in kcal/mol. */
export interface WaveProblem<Geometry extends { readonly energy: number }> {
  readonly cellCount: number;
  /** Starts that a geometry of one cell offers to its neighbors. */
  offers(cell: number, geometry: Geometry): readonly Start[];
  /** Relaxes a start within its cell; null where nothing sound comes of it. */
  settle(start: Start): Promise<Geometry | null>;
  /** Whether two geometries of one cell are the same. */
  same(one: Geometry, other: Geometry): boolean;
}

/** A geometry (Å, 3N) to be relaxed in a cell. */
export interface Start {
  readonly cell: number;
  readonly coordinates: Float64Array;
  /** Relax further than usual: the start is the best geometry known and worth it. */
  readonly thorough?: boolean;
}

export interface WaveSettings {
  /** Families kept in a cell. */
  readonly families: number;
  /** Highest energy of a family above the best of its cell, kcal/mol. */
  readonly window: number;
}

export interface Wave<Geometry> {
  /** Geometries of each cell, lowest first; empty where no wave arrived. */
  readonly families: readonly (readonly Geometry[])[];
  /** Relaxes more starts and lets what they bring run over the grid. False when time ran out before all was still. */
  run(starts: readonly Start[], control: Control): Promise<boolean>;
}

interface Cell<Geometry> {
  kept: Geometry[];
  /** Everything ever found here, so that what was dropped is not followed twice. */
  readonly known: Geometry[];
}

/** Creates the still surface; nothing is computed before the first run. */
export function createWave<Geometry extends { readonly energy: number }>(
  problem: WaveProblem<Geometry>,
  { families, window }: WaveSettings,
): Wave<Geometry> {
  const cells = Array.from({ length: problem.cellCount }, (): Cell<Geometry> => ({
    kept: [],
    known: [],
  }));
  const kept: Geometry[][] = cells.map((cell) => cell.kept);

  /** Takes a geometry into its cell; true when it is new and good enough to be followed. */
  const take = (index: number, geometry: Geometry): boolean => {
    const cell = cells[index];
    const twin = cell.known.find((other) => problem.same(geometry, other));
    if (twin) {
      // The same geometry, better relaxed: it takes the place, but its neighbors have nothing to learn from it.
      if (geometry.energy < twin.energy) replace(cell, twin, geometry);
      return false;
    }
    cell.known.push(geometry);
    const all = [...cell.kept, geometry].sort((a, b) => a.energy - b.energy);
    cell.kept.splice(0, Infinity, ...all.slice(0, families));
    const limit = cell.kept[0].energy + window;
    while (cell.kept[cell.kept.length - 1].energy > limit) cell.kept.pop();
    return cell.kept.includes(geometry);
  };

  const run = async (starts: readonly Start[], control: Control): Promise<boolean> => {
    const open: { cell: number; geometry: Geometry }[] = [];
    const relax = async (start: Start): Promise<void> => {
      if (control.due()) await control.pause();
      const geometry = await problem.settle(start);
      if (geometry && take(start.cell, geometry)) open.push({ cell: start.cell, geometry });
      control.report(kept.filter((cell) => cell.length > 0).length / kept.length, 'torsion scan');
    };
    for (const start of starts) {
      if (control.expired() && kept.some((cell) => cell.length > 0)) return false;
      await relax(start);
    }
    while (open.length > 0) {
      const { cell, geometry } = takeLowest(open);
      // Meanwhile dropped, or replaced by a better relaxed twin, which offers the same.
      if (!cells[cell].kept.some((other) => other === geometry || problem.same(other, geometry))) {
        continue;
      }
      for (const start of problem.offers(cell, geometry)) {
        if (control.expired()) return false;
        await relax(start);
      }
    }
    return true;
  };
  return { families: kept, run };
}

function replace<Geometry extends { readonly energy: number }>(
  { kept, known }: Cell<Geometry>,
  old: Geometry,
  better: Geometry,
): void {
  for (const list of [kept, known]) {
    const position = list.indexOf(old);
    if (position !== -1) list[position] = better;
  }
  kept.sort((a, b) => a.energy - b.energy);
}

/** The lowest first: waves then run up the slopes from the valleys, and high families are dropped before they travel. */
function takeLowest<Geometry extends { readonly energy: number }>(
  open: { cell: number; geometry: Geometry }[],
): { cell: number; geometry: Geometry } {
  let best = 0;
  for (let n = 1; n < open.length; n++) {
    if (open[n].geometry.energy < open[best].geometry.energy) best = n;
  }
  return open.splice(best, 1)[0];
}
