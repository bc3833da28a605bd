/** How much a search does at each level of effort. */
import type { SearchEffort } from './conformers';
import type { ShapeMoves } from './shape-moves';

export interface SearchPlan {
  /** Embeddings from which ring shapes and nitrogen pyramids are collected. */
  readonly embeddings: number;
  /** Most combinations of torsions, times ring shapes, that are all tried. */
  readonly combinations: number;
  /** Combinations tried where there are more. */
  readonly samples: number;
  /** Kicks in a row without anything new after which the set counts as stable. */
  readonly patience: number;
  /** Most geometries tried in all. */
  readonly starts: number;
}

const SCALES: Readonly<Record<SearchEffort, number>> = { quick: 0.3, normal: 1, thorough: 4 };

/** Plans a search by the freedom of the molecule. */
export function planSearch(moves: ShapeMoves, effort: SearchEffort): SearchPlan {
  const scale = SCALES[effort];
  const { drives, ringMoves, inversions } = moves;
  const corners = ringMoves.filter(({ arc }) => arc.length === 1).length;
  const freedom = drives.length + corners + inversions.length;
  // The corners of large rings move together: their shapes are many and found slowly.
  const looseCorners = ringMoves.filter(({ arc, rest }) => arc.length === 1 && rest.length >= 5);
  const scaled = (count: number): number => Math.ceil(scale * count);
  return {
    embeddings:
      corners + inversions.length === 0
        ? 3
        : scaled(Math.min(50, 10 + 3 * (corners + inversions.length))),
    combinations: scaled(1500),
    samples: scaled(30 * drives.length),
    patience: freedom === 0 ? 0 : scaled(20 * (1 + freedom + looseCorners.length)),
    starts: scaled(10_000),
  };
}
