/** Putting tasks that ended back into the queue. */
import { inArray, sql } from 'drizzle-orm';
import { programFor } from '../domain/second-opinions';
import { reopen } from './batch-finish';
import type { Executor } from './db';
import { tasks } from './db/schema';
import { dequeue, enqueue } from './queue';

/** Queues ended tasks again, behind so many others of their member; the caller has locked them. */
export async function queueAgain(
  executor: Executor,
  ended: readonly Pick<typeof tasks.$inferSelect, 'id' | 'kind'>[],
  ahead: number,
): Promise<void> {
  const ids = ended.map(({ id }) => id);
  await executor
    .update(tasks)
    .set({
      state: 'queued',
      error: null,
      reused: false,
      progress: 0,
      worker: null,
      queuedAt: sql`now()`,
      startedAt: null,
      beatAt: null,
      finishedAt: null,
    })
    .where(inArray(tasks.id, ids));
  await reopen(executor, ids);
  // The job of the attempt before has the same id and would stand in the way.
  await dequeue(executor, ids);
  await enqueue(
    executor,
    ended.map(({ id, kind }, position) => ({
      id,
      priority: -(ahead + position),
      program: programFor(kind),
    })),
  );
}
