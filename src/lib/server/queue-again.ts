/** Putting tasks that ended back into the queue. */
import { inArray, sql } from 'drizzle-orm';
import { reopen } from './batch-finish';
import type { Executor } from './db';
import { tasks } from './db/schema';
import { dequeue, enqueue } from './queue';

/** Queues ended tasks again, behind so many others of their member; the caller has locked them. */
export async function queueAgain(
  executor: Executor,
  ids: readonly string[],
  ahead: number,
): Promise<void> {
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
    .where(inArray(tasks.id, [...ids]));
  await reopen(executor, ids);
  // The job of the attempt before has the same id and would stand in the way.
  await dequeue(executor, ids);
  await enqueue(
    executor,
    ids.map((id, position) => ({ id, priority: -(ahead + position) })),
  );
}
