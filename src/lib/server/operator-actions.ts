/** What operators do: each act and its line in the operators' record in one transaction. */
import { and, asc, eq, inArray, sql, type SQL } from 'drizzle-orm';
import { machineFaults, type MachineFault } from '../domain/operation';
import { db } from './db';
import { tasks } from './db/schema';
import { tell } from './live';
import { recordOperation, type Operator } from './operators';
import { queueAgain } from './queue-again';
import { order, type WorkerOrder } from './workers';

/** Most tasks that one act queues again; the next act goes on. */
const AT_ONCE = 1_000;

const names = { take: 'resume worker', pause: 'pause worker', drain: 'drain worker' } as const;

/** Pauses, resumes or drains a worker, which hears of it at once; false where it is gone. */
export async function orderWorker(
  operator: Operator,
  worker: string,
  wanted: WorkerOrder,
): Promise<boolean> {
  return db.transaction(async (tx) => {
    if (!(await order(tx, worker, wanted))) return false;
    await recordOperation(tx, operator, names[wanted], `worker:${worker}`);
    await tell(tx, 'worker-ordered', [worker]);
    return true;
  });
}

/** Queues one task again that failed through machine or program. Returns how many: one or none. */
export function requeueTask(operator: Operator, taskId: string): Promise<number> {
  return requeue(operator, eq(tasks.id, taskId), `task:${taskId}`);
}

/** Queues tasks again that failed for a reason, the oldest first, at most a thousand. Returns how many. */
export function requeueReason(operator: Operator, reason: MachineFault): Promise<number> {
  return requeue(operator, sql`${tasks.error}->>'code' = ${reason}`, `reason:${reason}`);
}

async function requeue(operator: Operator, chosen: SQL, subject: string): Promise<number> {
  return db.transaction(async (tx) => {
    const failed = await tx
      .select({ id: tasks.id, kind: tasks.kind, batchId: tasks.batchId })
      .from(tasks)
      .where(
        and(
          chosen,
          eq(tasks.state, 'failed'),
          inArray(sql`${tasks.error}->>'code'`, [...machineFaults]),
        ),
      )
      .orderBy(asc(tasks.finishedAt), asc(tasks.id))
      .limit(AT_ONCE)
      // What a member runs again at this moment is theirs.
      .for('update', { skipLocked: true });
    if (failed.length === 0) return 0;
    await queueAgain(tx, failed, 0);
    await recordOperation(tx, operator, 'queue failed tasks again', subject, {
      tasks: failed.length,
    });
    await tell(tx, 'batch-changed', [...new Set(failed.map(({ batchId }) => batchId))]);
    return failed.length;
  });
}
