/** A heat of formation by PM7: conformers by MMFF94s in a computing thread, then the lowest of them by mopac. */
import { conformersTaskSchema } from '../src/lib/domain/compute';
import { coordinatesOf } from '../src/lib/domain/molfile-geometry';
import { ELEMENT_SYMBOLS } from '../src/lib/engine';
import type { HeatOutcome, HeatSubject } from '../src/lib/server/heats';
import type { Report } from './opinion';
import { computeInThread } from './pool';
import { describeMolecule } from './programs/describe-molecule';
import { relaxByPm7 } from './programs/mopac';
import {
  isGap,
  type InstalledProgram,
  type ProgramLimits,
  type ProgramPoint,
} from './programs/program';

/** Share of the work that the search takes in the progress. */
const SEARCH_SHARE = 0.3;

/** The lowest heat among the lowest conformers; a conformer that PM7 does not converge is a gap with its reason. */
export async function computeHeat(
  { settings, input, molecule }: HeatSubject,
  mopac: InstalledProgram,
  limits: ProgramLimits,
  report: Report,
): Promise<HeatOutcome> {
  const start = performance.now();
  const task = conformersTaskSchema.parse({
    kind: 'conformers',
    limit: settings.conformers,
    seed: settings.seed,
  });
  const answer = await computeInThread(
    { molecule: input, task },
    {
      budget: limits.seconds * 1000,
      signal: limits.signal,
      report: (fraction) => report(SEARCH_SHARE * fraction, 'searching conformers'),
    },
  );
  if (!('result' in answer) || !('conformers' in answer.result)) {
    const why = 'refused' in answer ? answer.refused.message : 'the conformer search failed';
    return { lowest: null, tried: 0, gaps: [why], ...provenance(mopac, start) };
  }
  const { conformers } = answer.result;
  const described = describeMolecule(molecule, ELEMENT_SYMBOLS);
  const gaps: string[] = [];
  let lowest: ProgramPoint | null = null;
  for (const [n, { molfile }] of conformers.entries()) {
    const share = n / conformers.length;
    report(SEARCH_SHARE + (1 - SEARCH_SHARE) * share, `conformer ${n + 1} of ${conformers.length}`);
    const point = await relaxByPm7(mopac, described, coordinatesOf(molfile), limits);
    if (isGap(point)) gaps.push(point.gap);
    else if (!lowest || point.energy < lowest.energy) lowest = point;
  }
  return { lowest, tried: conformers.length, gaps, ...provenance(mopac, start) };
}

function provenance(mopac: InstalledProgram, start: number) {
  return {
    program: `mopac ${mopac.version}`,
    seconds: Math.round(performance.now() - start) / 1000,
  };
}
