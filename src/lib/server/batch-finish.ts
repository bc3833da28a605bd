/**
 * When a batch has ended: noted once, whoever ends its last task, and taken back when tasks of it are run again. It is
 * noted after the transaction that ended a task, because two that end the last two tasks at the same moment do not see
 * each other; should the process die in between, `finishEnded` of another one notes it.
 */
import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm';
import { db, type Executor } from './db';
import { batches, tasks } from './db/schema';

const isOpen = sql`exists (select 1 from ${tasks} where ${tasks.batchId} = ${batches.id} and ${tasks.state} in ('queued', 'running'))`;

/** Notes that a batch has ended, where nothing of it is open any more. True for the one call that noted it. */
export async function noteFinish(batchId: string): Promise<boolean> {
  return db.transaction(async (transaction) => {
    // Locked first and looked at afterwards: what ran tasks again meanwhile is seen by the second statement.
    await transaction
      .select({ id: batches.id })
      .from(batches)
      .where(eq(batches.id, batchId))
      .for('no key update');
    const noted = await transaction
      .update(batches)
      .set({ finishedAt: sql`now()` })
      .where(
        and(
          eq(batches.id, batchId),
          isNotNull(batches.submittedAt),
          isNull(batches.finishedAt),
          sql`not ${isOpen}`,
        ),
      )
      .returning({ id: batches.id });
    return noted.length > 0;
  });
}

/** Notes that a batch ended through what its team did by hand, which nobody has to be told of. */
export async function finishQuietly(executor: Executor, batchId: string): Promise<void> {
  await executor
    .update(batches)
    .set({ finishedAt: sql`now()`, toldAt: sql`now()` })
    .where(and(eq(batches.id, batchId), isNull(batches.finishedAt), sql`not ${isOpen}`));
}

/** Takes back that batches have ended: tasks of them are run again, and what was removed is computed anew. */
export async function reopen(executor: Executor, batchId: string): Promise<void> {
  await executor
    .update(batches)
    .set({ finishedAt: null, toldAt: null, removalAt: null, removedAt: null })
    .where(eq(batches.id, batchId));
}

/** Notes the end of batches whose last task was ended by a process that died right then. */
export async function finishEnded(): Promise<void> {
  const ended = await db
    .select({ id: batches.id })
    .from(batches)
    .where(and(isNotNull(batches.submittedAt), isNull(batches.finishedAt), sql`not ${isOpen}`))
    .limit(100);
  for (const { id } of ended) await noteFinish(id);
}
