/** From a draft to queued tasks, in one transaction. */
import { asc, eq, sql } from 'drizzle-orm';
import { CHEMIST_BATCH_LIMIT, may } from '../domain/roles';
import type { Plan } from '../domain/submission';
import { batchFinished } from './batch-finish';
import { db, type Executor } from './db';
import { batches, entries, molecules, tasks } from './db/schema';
import { ownDraft } from './drafts';
import { recordEvent } from './events';
import { tell } from './live';
import { require, type Member } from './member';
import { checkAtoms, checkRoom, lockTeam } from './limits';
import { planTasks, type PlannedTask } from './plans';
import { enqueue } from './queue';
import { SubmissionError } from './refusals';
import { findStored, identityOf } from './results';
import { waitingOf } from './tasks';

/** Rows and tasks are written in chunks of this size, so that no statement grows without bound. */
const CHUNK = 500;

/**
 * Submits a draft: the batch, its tasks and their jobs in one transaction, so that nothing is half there. Tasks whose
 * answer the team already has are done at once with it. Bad rows get no task and hinder no other.
 */
export async function submit(member: Member, batchId: string, plan: Plan) {
  require(member, 'submit molecules');
  return db.transaction(async (transaction) => {
    // Two submissions at once see each other's tasks, and neither passes a limit that both together break.
    await lockTeam(transaction, member.teamId);
    const draft = await ownDraft(transaction, member, batchId);
    const rows = await transaction
      .select({
        id: entries.id,
        chosenBonds: entries.chosenBonds,
        mapBonds: entries.mapBonds,
        moleculeId: molecules.id,
        rotors: molecules.rotors,
        hasGeometry: molecules.hasGeometry,
        name: entries.name,
        atomCount: molecules.atomCount,
      })
      .from(entries)
      .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
      .where(eq(entries.batchId, batchId))
      .orderBy(asc(entries.position));
    checkSize(member, rows.length);
    await checkAtoms(transaction, member, rows);
    await transaction
      .update(batches)
      .set({ plan, submittedAt: sql`now()` })
      .where(eq(batches.id, batchId));
    const ahead = await waitingOf(transaction, member);
    let queued = 0;
    let reused = 0;
    for (let from = 0; from < rows.length; from += CHUNK) {
      const planned = rows.slice(from, from + CHUNK).flatMap((row) => planTasks(row, plan));
      const written = await writeTasks(transaction, batchId, planned);
      await enqueue(
        transaction,
        written.map((id, position) => ({ id, priority: -(ahead + queued + position) })),
      );
      queued += written.length;
      reused += planned.length - written.length;
    }
    if (queued + reused === 0) {
      throw new SubmissionError('Nothing in this batch can be computed with what was chosen.');
    }
    if (queued > 0) await checkRoom(transaction, member, queued);
    await recordEvent(transaction, member, 'submit batch', `batch:${batchId}`, {
      name: draft.name,
      queued,
      reused,
    });
    // Who submits what is answered already sees so at once, and needs no letter.
    await batchFinished(transaction, batchId, { isQuiet: true });
    await tell(transaction, 'batch-changed', [batchId]);
    return { queued, reused };
  });
}

function checkSize(member: Member, rowCount: number): void {
  if (rowCount === 0) throw new SubmissionError('No row of this batch can be computed.');
  if (rowCount > CHEMIST_BATCH_LIMIT && !may(member.role, 'submit bulk batches')) {
    throw new SubmissionError(
      `Your role submits at most ${CHEMIST_BATCH_LIMIT} molecules at a time; this batch has ${rowCount}. A modeler of the team can submit it.`,
    );
  }
}

/** Writes tasks, those with a stored answer as done; returns the ids of those that are to be computed. */
async function writeTasks(
  executor: Executor,
  batchId: string,
  planned: readonly PlannedTask[],
): Promise<string[]> {
  if (planned.length === 0) return [];
  const stored = await findStored(executor, planned);
  const written = await executor
    .insert(tasks)
    .values(
      planned.map((task) => {
        const resultId = stored.get(identityOf(task));
        const { entryId, kind, settings } = task;
        return resultId === undefined
          ? { batchId, entryId, kind, settings }
          : {
              batchId,
              entryId,
              kind,
              settings,
              state: 'done' as const,
              progress: 1,
              resultId,
              reused: true,
              finishedAt: sql`now()`,
            };
      }),
    )
    .returning({ id: tasks.id, state: tasks.state });
  return written.filter(({ state }) => state === 'queued').map(({ id }) => id);
}
