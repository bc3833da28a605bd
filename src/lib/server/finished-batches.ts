/** The moment a batch finishes: its last open task ends, in whatever way. */
import { and, count, eq, inArray, isNotNull } from 'drizzle-orm';
import type { Executor } from './db';
import { batches, tasks, teams, webhooks } from './db/schema';
import { environment } from './environment';
import { queueDelivery, type Message } from './webhook-messages';

/**
 * To be called in the transaction that stores the end of tasks, after it was stored. Where nothing of the batch is open
 * any more, the finish is told in the same transaction: once for each finish, also when two workers end the last two
 * tasks at the same time, because they pass here one after the other.
 */
export async function batchFinished(executor: Executor, batchId: string): Promise<void> {
  const [batch] = await executor
    .select({ id: batches.id })
    .from(batches)
    .where(and(eq(batches.id, batchId), isNotNull(batches.submittedAt)))
    .for('no key update');
  if (!batch || (await hasOpenTasks(executor, batchId))) return;
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

/** Queues a delivery to every webhook of the team that is on. */
async function tellWebhooks(executor: Executor, batchId: string): Promise<void> {
  const told = await executor
    .select({ id: webhooks.id })
    .from(webhooks)
    .innerJoin(batches, eq(batches.teamId, webhooks.teamId))
    .where(and(eq(batches.id, batchId), webhooks.isOn));
  if (told.length === 0) return;
  const message = await describeFinish(executor, batchId);
  for (const { id } of told) await queueDelivery(executor, id, message);
}

async function describeFinish(executor: Executor, batchId: string): Promise<Message> {
  const [{ team, batch }] = await executor
    .select({
      team: { id: teams.id, name: teams.name },
      batch: { id: batches.id, name: batches.name, submittedAt: batches.submittedAt },
    })
    .from(batches)
    .innerJoin(teams, eq(teams.id, batches.teamId))
    .where(eq(batches.id, batchId));
  const states = await executor
    .select({ state: tasks.state, count: count() })
    .from(tasks)
    .where(eq(tasks.batchId, batchId))
    .groupBy(tasks.state);
  const countOf = (state: string) => states.find((each) => each.state === state)?.count ?? 0;
  return {
    event: 'batch.finished',
    at: new Date().toISOString(),
    team,
    batch: {
      id: batch.id,
      name: batch.name,
      submittedAt: batch.submittedAt!.toISOString(),
      counts: { done: countOf('done'), failed: countOf('failed'), cancelled: countOf('cancelled') },
      page: new URL(`/batches/${batch.id}`, environment.WINDLASS_ORIGIN).href,
      bundle: new URL(`/api/v1/batches/${batch.id}/bundle`, environment.WINDLASS_ORIGIN).href,
    },
  };
}
