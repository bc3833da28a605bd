/** Tasks that external programs perform: from what is stored to what is stored beside it. */
import { programOfKind, type ProgramTaskKind } from '../src/lib/domain/second-opinions';
import { orderAgain } from '../src/lib/engine';
import * as heats from '../src/lib/server/heats';
import * as opinions from '../src/lib/server/opinions';
import * as rankings from '../src/lib/server/rankings';
import type { ClaimedTask, TaskError } from '../src/lib/server/tasks';
import { computeHeat } from './heat';
import type { InstalledPrograms } from './installed-programs';
import { computeOpinion, type Report } from './opinion';
import { computeRanking } from './ranking';
import { ProgramUnavailable } from './programs/run-program';

/** Longest time of one call of a program, s. */
const CALL_SECONDS = 300;

/** What to do when a task is computed: store it, which is false where it is no longer held, or say why there is nothing to store. */
export type ProgramAnswer =
  { readonly store: () => Promise<boolean> } | { readonly refused: TaskError };

const gone: TaskError = {
  code: 'missing-result',
  message: 'The result that this was asked about is not there any more.',
};

/** Performs a task with the programs of this worker. Rejects when cancelled, and by ProgramUnavailable. */
export async function performWithProgram(
  task: ClaimedTask & { readonly kind: ProgramTaskKind },
  installed: InstalledPrograms,
  signal: AbortSignal,
  report: Report,
): Promise<ProgramAnswer> {
  const name = programOfKind[task.kind];
  const program = installed[name];
  if (!program) throw new ProgramUnavailable(`This worker has no ${name}.`);
  const limits = { seconds: CALL_SECONDS, signal };
  switch (task.kind) {
    case 'opinion': {
      const scan = await opinions.scanOf(task);
      if (!scan) return { refused: gone };
      const outcome = await computeOpinion(scan, program, limits, report);
      if (outcome.curves[0].points.every((point) => point === null)) {
        return { refused: noPoint(outcome.gaps[0]?.reason ?? '') };
      }
      return { store: () => opinions.store(task, scan, outcome) };
    }
    case 'ranking': {
      const search = await rankings.searchOf(task);
      if (!search) return { refused: gone };
      const outcome = await computeRanking(search, program, limits, report);
      if (outcome.points.length === 0) return { refused: noPoint(outcome.gaps[0]?.reason ?? '') };
      const ordered = orderAgain(search.molecule, outcome.points);
      return { store: () => rankings.store(task, search, outcome, ordered) };
    }
    case 'heat': {
      const subject = await heats.subjectOf(task);
      const outcome = await computeHeat(subject, program, limits, report);
      if (outcome.lowest === null) return { refused: noPoint(outcome.gaps[0] ?? '') };
      const { lowest } = outcome;
      return { store: () => heats.store(task, subject, outcome, lowest) };
    }
  }
}

function noPoint(reason: string): TaskError {
  return {
    code: 'no-points',
    message: `Not a single point could be computed; at the first, ${reason}.`,
  };
}
