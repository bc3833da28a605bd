/** The log of what was sent to webhooks: reading it, sending again, and forgetting what is old. */
import { error } from '@sveltejs/kit';
import { and, desc, eq, isNull, lt, or, sql } from 'drizzle-orm';
import { DELIVERY_DAYS, type WebhookEvent } from '../domain/webhooks';
import { db } from './db';
import { webhookDeliveries, webhooks } from './db/schema';
import { recordEvent } from './events';
import { notFound, require, type Member } from './member';
import { limitSendingByHand } from './webhook-messages';
import { enqueueDeliveries } from './webhook-queue';

/** Where the log goes on: after the delivery that was made at this time with this id. */
export type AfterDelivery = readonly [createdAt: string, id: string];

/** Deliveries to a webhook after a place, the newest first; 404 where the webhook is not the team's. */
export async function listDeliveries(
  member: Member,
  webhookId: string,
  after: AfterDelivery | null,
  count: number,
) {
  require(member, 'manage webhooks');
  const rows = webhookDeliveries;
  const isOwn = and(eq(webhooks.id, webhookId), eq(webhooks.teamId, member.teamId));
  if ((await db.$count(webhooks, isOwn)) === 0) notFound('webhook');
  return db
    .select({
      id: rows.id,
      event: sql<WebhookEvent>`${rows.event}`,
      state: rows.state,
      attempts: rows.attempts,
      createdAt: rows.createdAt,
      attemptedAt: rows.attemptedAt,
      status: rows.status,
      reason: rows.reason,
      milliseconds: rows.milliseconds,
      nextAt: rows.nextAt,
      isUnderWay: sql<boolean>`${rows.startedAt} is not null`,
      // A Date holds milliseconds, the database microseconds: the place in the list is told in full.
      place: sql<string>`${rows.createdAt}::text`,
    })
    .from(rows)
    .where(
      and(
        eq(rows.webhookId, webhookId),
        after
          ? sql`(${rows.createdAt}, ${rows.id}) < (${after[0]}::timestamptz, ${after[1]}::uuid)`
          : undefined,
      ),
    )
    .orderBy(desc(rows.createdAt), desc(rows.id))
    .limit(count);
}

/** Sends a delivery again at once, with its old number, so that receivers can tell that they have it already. */
export async function redeliver(member: Member, deliveryId: string): Promise<void> {
  require(member, 'manage webhooks');
  await limitSendingByHand(member);
  await db.transaction(async (tx) => {
    const [found] = await tx
      .select({
        webhookId: webhooks.id,
        name: webhooks.name,
        isOn: webhooks.isOn,
        event: webhookDeliveries.event,
        attempts: webhookDeliveries.attempts,
        startedAt: webhookDeliveries.startedAt,
      })
      .from(webhookDeliveries)
      .innerJoin(webhooks, eq(webhooks.id, webhookDeliveries.webhookId))
      .where(and(eq(webhookDeliveries.id, deliveryId), eq(webhooks.teamId, member.teamId)))
      .for('update', { of: webhookDeliveries });
    if (!found) notFound('delivery');
    if (!found.isOn && found.event !== 'webhook.test') {
      error(409, 'The webhook is off. Switch it on first, then send again.');
    }
    if (found.startedAt) error(409, 'It is being sent right now. Look again in a moment.');
    await tx
      .update(webhookDeliveries)
      .set({ state: 'waiting', step: 0, nextAt: sql`now()` })
      .where(eq(webhookDeliveries.id, deliveryId));
    await enqueueDeliveries(tx, [{ deliveryId, attempts: found.attempts }]);
    await recordEvent(tx, member, 'send delivery again', `webhook:${found.webhookId}`, {
      name: found.name,
      delivery: deliveryId,
    });
  });
}

/** Queues attempts again that fell due a while ago and whose jobs are gone. Returns how many. */
export async function requeueStranded(): Promise<number> {
  const { state, nextAt, startedAt } = webhookDeliveries;
  const longAgo = sql`now() - interval '10 minutes'`;
  return db.transaction(async (tx) => {
    const stranded = await tx
      .update(webhookDeliveries)
      .set({ nextAt: sql`now()`, startedAt: null })
      .where(
        and(
          eq(state, 'waiting'),
          lt(nextAt, longAgo),
          or(isNull(startedAt), lt(startedAt, longAgo)),
        ),
      )
      .returning({ deliveryId: webhookDeliveries.id, attempts: webhookDeliveries.attempts });
    await enqueueDeliveries(tx, stranded);
    return stranded.length;
  });
}

/** Forgets what the log has kept for long enough. */
export async function forgetOld(): Promise<void> {
  await db
    .delete(webhookDeliveries)
    .where(lt(webhookDeliveries.createdAt, sql`now() - make_interval(days => ${DELIVERY_DAYS})`));
}
