/** One attempt to deliver to a webhook, from its claim to what is written about it. */
import { and, eq, isNotNull, isNull, lt, or, sql } from 'drizzle-orm';
import { GIVE_UP_DAYS, RETRY_WAITS, type WebhookEvent } from '../domain/webhooks';
import { db, type Executor } from './db';
import { memberships, teams, users, webhookDeliveries, webhooks } from './db/schema';
import { recordEvent } from './events';
import { webhookGivenUpLetter } from './letters';
import { post } from './mail';
import type { Resolve } from './webhook-addresses';
import { dropWaiting } from './webhook-messages';
import { enqueueDeliveries, type DeliveryJob } from './webhook-queue';
import { sendMessage, type Attempt } from './webhook-request';
import { openSecrets } from './webhooks';

/** An attempt that began this long ago and has not ended belongs to a worker that died. */
const SILENCE = sql`now() - interval '25 seconds'`;

/** How an attempt ended; 'none' where there was nothing to do. */
export type DeliveryOutcome = 'delivered' | 'failed' | 'none';

type Delivery = typeof webhookDeliveries.$inferSelect;

/**
 * Carries out an attempt that fell due. Does nothing where another job did it already; throws while another worker is on
 * it, so that the queue asks again later.
 */
export async function deliver(job: DeliveryJob, resolve?: Resolve): Promise<DeliveryOutcome> {
  const delivery = await claim(job);
  if (!delivery) return 'none';
  const [webhook] = await db.select().from(webhooks).where(eq(webhooks.id, delivery.webhookId));
  if (!webhook) return 'none';
  if (!webhook.isOn && delivery.event !== 'webhook.test') {
    await db.transaction((tx) =>
      settle(tx, delivery, { status: null, reason: 'The webhook is off.', milliseconds: 0 }, null),
    );
    return 'failed';
  }
  const secrets = openSecrets(webhook);
  const attempt: Attempt =
    secrets.length === 0
      ? {
          status: null,
          reason:
            'The secret cannot be read any more, because the operator changed AUTH_SECRET. Make a new one.',
          milliseconds: 0,
        }
      : await sendMessage(
          {
            url: webhook.url,
            event: delivery.event as WebhookEvent,
            delivery: delivery.id,
            body: delivery.body,
            secrets,
          },
          resolve,
        );
  return attempt.reason === '' ? succeed(delivery, attempt) : failAttempt(delivery, attempt);
}

async function claim({ deliveryId, attempts }: DeliveryJob): Promise<Delivery | null> {
  const { id, state, startedAt } = webhookDeliveries;
  const isMeant = and(
    eq(id, deliveryId),
    eq(state, 'waiting'),
    eq(webhookDeliveries.attempts, attempts),
  );
  const [claimed] = await db
    .update(webhookDeliveries)
    .set({ startedAt: sql`now()` })
    .where(and(isMeant, or(isNull(startedAt), lt(startedAt, SILENCE))))
    .returning();
  if (claimed) return claimed;
  if ((await db.$count(webhookDeliveries, isMeant)) > 0) {
    throw new Error(`delivery ${deliveryId} is still in another worker's hands`);
  }
  return null;
}

/** Writes how an attempt went; `waitSeconds` is null where it was the last. False where another one wrote it before. */
async function settle(
  executor: Executor,
  { id, attempts, step }: Delivery,
  { status, reason, milliseconds }: Attempt,
  waitSeconds: number | null,
): Promise<boolean> {
  const state = reason === '' ? 'delivered' : waitSeconds === null ? 'failed' : 'waiting';
  const settled = await executor
    .update(webhookDeliveries)
    .set({
      state,
      status,
      reason,
      milliseconds,
      attempts: attempts + 1,
      step: step + 1,
      startedAt: null,
      attemptedAt: sql`now()`,
      nextAt: waitSeconds === null ? null : sql`now() + make_interval(secs => ${waitSeconds})`,
    })
    .where(
      and(
        eq(webhookDeliveries.id, id),
        eq(webhookDeliveries.state, 'waiting'),
        eq(webhookDeliveries.attempts, attempts),
      ),
    )
    .returning({ id: webhookDeliveries.id });
  return settled.length > 0;
}

async function succeed(delivery: Delivery, attempt: Attempt): Promise<DeliveryOutcome> {
  await db.transaction(async (tx) => {
    if (!(await settle(tx, delivery, attempt, null))) return;
    await tx
      .update(webhooks)
      .set({ failingSince: null })
      .where(and(eq(webhooks.id, delivery.webhookId), isNotNull(webhooks.failingSince)));
  });
  return 'delivered';
}

async function failAttempt(delivery: Delivery, attempt: Attempt): Promise<DeliveryOutcome> {
  const isTest = delivery.event === 'webhook.test';
  const wait = isTest ? null : (RETRY_WAITS[delivery.step] ?? null);
  const letters = await db.transaction(async (tx) => {
    if (!(await settle(tx, delivery, attempt, wait))) return [];
    if (wait !== null) {
      const next = { deliveryId: delivery.id, attempts: delivery.attempts + 1 };
      await enqueueDeliveries(tx, [next], wait);
    }
    return isTest ? [] : noteFailure(tx, delivery.webhookId, attempt.reason);
  });
  for (const { email, letter } of letters) post(email, letter);
  return 'failed';
}

/** Remembers since when nothing gets through, and gives up after a week; answers the letters to be sent then. */
async function noteFailure(tx: Executor, webhookId: string, reason: string) {
  await tx
    .update(webhooks)
    .set({ failingSince: sql`now()` })
    .where(and(eq(webhooks.id, webhookId), isNull(webhooks.failingSince)));
  const [givenUp] = await tx
    .update(webhooks)
    .set({ isOn: false, givenUpAt: sql`now()` })
    .where(
      and(
        eq(webhooks.id, webhookId),
        webhooks.isOn,
        lt(webhooks.failingSince, sql`now() - make_interval(days => ${GIVE_UP_DAYS})`),
      ),
    )
    .returning();
  if (!givenUp) return [];
  await dropWaiting(tx, webhookId, 'The webhook was switched off because nothing got through.');
  await recordEvent(
    tx,
    { teamId: givenUp.teamId, userId: null },
    'give webhook up',
    `webhook:${webhookId}`,
    { name: givenUp.name, reason },
  );
  const leads = await tx
    .select({ email: users.email, name: users.name, team: teams.name })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .innerJoin(teams, eq(teams.id, memberships.teamId))
    .where(and(eq(memberships.teamId, givenUp.teamId), eq(memberships.role, 'lead')));
  return leads.map(({ email, name, team }) => ({
    email,
    letter: webhookGivenUpLetter(name, { team, webhook: givenUp.name, reason }),
  }));
}
