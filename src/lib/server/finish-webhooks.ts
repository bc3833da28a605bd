/** What a team's own programs are told when a batch ends. */
import { and, count, eq } from 'drizzle-orm';
import type { Executor } from './db';
import { batches, tasks, teams, webhooks } from './db/schema';
import { environment } from './environment';
import { queueDelivery, type Message } from './webhook-messages';

/** Queues a delivery to every webhook of the team that is on. */
export async function tellWebhooks(executor: Executor, batchId: string): Promise<void> {
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
