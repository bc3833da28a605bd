/** Conformers looked at again by GFN2-xTB, one by one. */
import { ELEMENT_SYMBOLS } from '../src/lib/engine';
import type { RankingOutcome, SearchForRanking } from '../src/lib/server/rankings';
import type { Report } from './opinion';
import { describeMolecule } from './programs/describe-molecule';
import { isGap, type InstalledProgram, type ProgramLimits } from './programs/program';
import { relax, singlePoint } from './programs/xtb';

/** The energies of the conformers as they are, or of what each relaxes to; one that fails is a gap with its reason. */
export async function computeRanking(
  search: SearchForRanking,
  xtb: InstalledProgram,
  limits: ProgramLimits,
  report: Report,
): Promise<RankingOutcome> {
  const start = performance.now();
  const molecule = describeMolecule(search.molecule, ELEMENT_SYMBOLS);
  const isOptimized = search.settings.depth === 'optimized';
  const points: RankingOutcome['points'][number][] = [];
  const gaps: RankingOutcome['gaps'][number][] = [];
  const count = search.conformers.length;
  for (const [n, { rank, coordinates }] of search.conformers.entries()) {
    report(n / count, `conformer ${n + 1} of ${count}`);
    const point = isOptimized
      ? await relax(xtb, molecule, coordinates, null, limits)
      : await singlePoint(xtb, molecule, coordinates, 2, limits);
    if (isGap(point)) gaps.push({ rank, reason: point.gap });
    else points.push({ ...point, rank });
  }
  return {
    points,
    gaps,
    program: `xtb ${xtb.version}`,
    seconds: Math.round(performance.now() - start) / 1000,
  };
}
