/** The moment a batch ends, in whatever way: noted once, and taken back when tasks of it are run again. */
import { and, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm';
import type { Executor } from './db';
import { batches, tasks } from './db/schema';
import { tellWebhooks } from './finish-webhooks';

/**
 * To be called in the transaction that stores the end of tasks, after it was stored. Where nothing of the batch is open
 * any more, its end is noted and the team's programs are told of it in the same transaction: once for each end, also
 * when two workers end the last two tasks at the same time, because they pass here one after the other. The letter about
 * it follows from what is noted (batch-letters.ts); an end that is `isQuiet` has none.
 */
export async function batchFinished(
  executor: Executor,
  batchId: string,
  { isQuiet = false } = {},
): Promise<void> {
  // Whoever waited here sees what the one before noted.
  const [unfinished] = await executor
    .select({ id: batches.id })
    .from(batches)
    .where(and(eq(batches.id, batchId), isNotNull(batches.submittedAt), isNull(batches.finishedAt)))
    .for('no key update');
  if (!unfinished || (await hasOpenTasks(executor, batchId))) return;
  await executor
    .update(batches)
    .set({ finishedAt: sql`now()`, ...(isQuiet ? { toldAt: sql`now()` } : {}) })
    .where(eq(batches.id, batchId));
  await tellWebhooks(executor, batchId);
}

async function hasOpenTasks(executor: Executor, batchId: string): Promise<boolean> {
  const open = await executor
    .select({ id: tasks.id })
    .from(tasks)
    .where(and(eq(tasks.batchId, batchId), inArray(tasks.state, ['queued', 'running'])))
    .limit(1);
  return open.length > 0;
}

/** Takes back that the batches of tasks have ended: they are run again, and what was removed is computed anew. */
export async function reopen(executor: Executor, taskIds: readonly string[]): Promise<void> {
  await executor
    .update(batches)
    .set({ finishedAt: null, toldAt: null, removalAt: null, removedAt: null })
    .where(
      inArray(
        batches.id,
        executor
          .select({ id: tasks.batchId })
          .from(tasks)
          .where(inArray(tasks.id, [...taskIds])),
      ),
    );
}
