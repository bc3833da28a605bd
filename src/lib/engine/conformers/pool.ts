/** The different minima found so far. */
import { isSameShape } from './sameness';
import type { VisibleGraph } from './visible-graph';

/** One minimum, and how often it was met and used as a parent. */
export interface Found {
  coordinates: Float64Array;
  energy: number;
  hits: number;
  uses: number;
}

/** What became of a geometry offered to the pool. */
export type Reception = 'new' | 'known' | 'outside';

export interface Pool {
  /** Lowest energy first. */
  readonly found: readonly Found[];
  /** Highest energy still of interest: the window's, or that of the first conformer the limit leaves out. */
  ceiling(): number;
  /** Takes a minimum in, unless it is known already or too high. */
  offer(coordinates: Float64Array, energy: number): Reception;
  /** A known conformer that a half-finished minimization is about to reach, if there is one. */
  approached(coordinates: Float64Array, energy: number): Found | null;
  /** Forgets all and takes these in. */
  replace(minima: readonly { coordinates: Float64Array; energy: number }[]): void;
}

/** Energies of one conformer found twice differ by less, kcal/mol. */
const SAME_ENERGY = 0.01;
/** How far above a conformer, kcal/mol, and how near to it, Å RMSD, a half-finished minimization counts as its. */
const APPROACH_ENERGY = 0.4;
const APPROACH_RMSD = 0.25;
/** Conformers kept beyond those to be returned: parents of others. */
const KEPT_BEYOND_LIMIT = 2;

/** Creates an empty pool for the lowest `limit` conformers within `window` kcal/mol. */
export function createPool(graph: VisibleGraph, limit: number, window: number): Pool {
  const found: Found[] = [];
  const capacity = KEPT_BEYOND_LIMIT * limit + 20;

  const ceiling = (): number => {
    if (found.length === 0) return Infinity;
    const highest = found[0].energy + window;
    return found.length <= limit ? highest : Math.min(highest, found[limit].energy);
  };

  const insert = (entry: Found): void => {
    let place = found.length;
    while (place > 0 && found[place - 1].energy > entry.energy) place--;
    found.splice(place, 0, entry);
  };

  return {
    found,
    ceiling,
    offer: (coordinates, energy) => {
      for (const other of found) {
        if (Math.abs(other.energy - energy) > SAME_ENERGY) continue;
        if (!isSameShape(graph, coordinates, other.coordinates)) continue;
        other.hits++;
        return 'known';
      }
      const isOutside = energy > ceiling();
      insert({ coordinates: coordinates.slice(), energy, hits: 1, uses: 0 });
      if (found.length > capacity) found.pop();
      return isOutside ? 'outside' : 'new';
    },
    approached: (coordinates, energy) => {
      for (const other of found) {
        if (energy < other.energy || energy > other.energy + APPROACH_ENERGY) continue;
        if (!isSameShape(graph, coordinates, other.coordinates, APPROACH_RMSD)) continue;
        other.hits++;
        return other;
      }
      return null;
    },
    replace: (minima) => {
      found.length = 0;
      for (const { coordinates, energy } of minima)
        insert({ coordinates, energy, hits: 1, uses: 0 });
    },
  };
}
