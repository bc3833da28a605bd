/** What a conformer search is asked and what it answers. */
import { ROOM_TEMPERATURE } from '../units';

/** How long a search goes on: how many starts it makes at least and how many minimizations at most. */
export type SearchEffort = 'quick' | 'normal' | 'thorough';

export interface ConformerSearchOptions {
  /** Most conformers returned. */
  readonly limit: number;
  /** Highest energy above the lowest conformer, kcal/mol. */
  readonly window: number;
  /** Temperature of the populations, K. */
  readonly temperature: number;
  readonly seed: number;
  readonly effort: SearchEffort;
}

export const defaultConformerSearchOptions: ConformerSearchOptions = {
  limit: 50,
  window: 10,
  temperature: ROOM_TEMPERATURE,
  seed: 1,
  effort: 'normal',
};

/** One conformer: a true minimum, and its weight among the others. */
export interface Conformer {
  /** 3N, Å, centered and turned onto the lowest conformer. */
  readonly coordinates: Float64Array;
  /** kcal/mol */
  readonly energy: number;
  /** kcal/mol above the lowest conformer. */
  readonly relative: number;
  /**
   * How many distinct minima of the labelled molecule this conformer stands for: its mirror image and what renumbering
   * makes of it, as far as turning about single bonds, puckering rings and inverting amines can lead there, and
   * without counting the turns of symmetric tops (methyl, tert-butyl, phenyl) that change nothing to see.
   */
  readonly degeneracy: number;
  /** Share of the set returned, degeneracy · exp(-relative / RT), 0 to 1. */
  readonly population: number;
  /** Å; over heavy atoms and hydrogens on heteroatoms, best renumbering and superposition, mirror image allowed. */
  readonly rmsdToLowest: number;
  /** RMS gradient at most 0.001 kcal/mol/Å and no negative curvature. */
  readonly converged: boolean;
}

/** Why a search ended: its set stopped changing, its time was over, or it reached a limit of count. */
export type SearchEnd = 'stable' | 'budget' | 'limit';

export interface ConformerSearchResult {
  /** Lowest first. */
  readonly conformers: readonly Conformer[];
  /** True when the set within the window stopped changing and is here whole. */
  readonly complete: boolean;
  readonly ended: SearchEnd;
  /** True when the set stopped changing, whether or not all of it is here: the lowest conformer can be relied on. */
  readonly settled: boolean;
  readonly counts: {
    /** Geometries tried. */
    readonly starts: number;
    /** Of these, those worth minimizing. */
    readonly minimizations: number;
  };
}
