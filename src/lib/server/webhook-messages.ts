/** Deliveries before they are sent: written and put into the queue in the caller's transaction. */
import { randomUUID } from 'node:crypto';
import { error } from '@sveltejs/kit';
import { and, eq, isNull } from 'drizzle-orm';
import type { BatchFinished, WebhookTest } from '../domain/webhooks';
import type { Executor } from './db';
import { webhookDeliveries } from './db/schema';
import type { InTeam } from './member';
import { limitRate } from './rate-limits';
import { enqueueDeliveries } from './webhook-queue';

/** Throws 429 where a team sends so much by hand that a receiver may suffer. */
export async function limitSendingByHand({ teamId }: InTeam): Promise<void> {
  const wait = await limitRate(['send to webhooks by hand', teamId]);
  if (wait !== null) error(429, `That was a lot to send by hand. Wait ${wait} seconds.`);
}

/** A message without the number of its delivery. */
export type Message = Omit<BatchFinished, 'delivery'> | Omit<WebhookTest, 'delivery'>;

/** Writes a delivery and queues its first attempt; answers its id. */
export async function queueDelivery(
  executor: Executor,
  webhookId: string,
  message: Message,
): Promise<string> {
  const id = randomUUID();
  const body = JSON.stringify({ delivery: id, ...message });
  await executor.insert(webhookDeliveries).values({ id, webhookId, event: message.event, body });
  await enqueueDeliveries(executor, [{ deliveryId: id, attempts: 0 }]);
  return id;
}

/** Ends what waits for a webhook, except an attempt that is under way. */
export async function dropWaiting(
  executor: Executor,
  webhookId: string,
  reason: string,
): Promise<void> {
  await executor
    .update(webhookDeliveries)
    .set({ state: 'failed', nextAt: null, reason })
    .where(
      and(
        eq(webhookDeliveries.webhookId, webhookId),
        eq(webhookDeliveries.state, 'waiting'),
        isNull(webhookDeliveries.startedAt),
      ),
    );
}
