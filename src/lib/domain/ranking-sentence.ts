/** A new order of conformers in a sentence: whether the lowest is another one comes first. */
import { energyText, type EnergyUnit } from './energy-units';
import type { RankingDepth } from './second-opinions';

export interface RankingFacts {
  readonly model: string;
  readonly depth: RankingDepth;
  /** Lowest first; `from` has the ranks from 0 that they came from, the lowest of them first. */
  readonly rows: readonly { readonly relative: number; readonly from: readonly number[] }[];
  readonly gaps: readonly unknown[];
}

/** What another model makes of conformers that were found by `base`. */
export function rankingSentence(
  { model, depth, rows, gaps }: RankingFacts,
  base: string,
  unit: EnergyUnit,
): string {
  const way =
    depth === 'optimized' ? `relaxed by ${model}` : `${model} on ${base} geometries, rough`;
  const first = rows[0].from;
  const own = rows.find(({ from }) => from.includes(0));
  const lowest = first.includes(0)
    ? `The models agree that conformer 1 is the lowest (${way})`
    : `The models disagree about the lowest conformer: 1 by ${base}, ${Math.min(...first) + 1} by ${model} (${way})${own ? `, where 1 lies ${energyText(own.relative, unit)} above it` : ''}`;
  const merged = rows.reduce((sum, { from }) => sum + from.length - 1, 0);
  const together =
    merged === 0 ? '' : `; ${merged} fell together with ${merged === 1 ? 'another' : 'others'}`;
  const missing = gaps.length === 0 ? '' : `; ${gaps.length} could not be computed`;
  return `${lowest}${together}${missing}.`;
}
