/** Webhooks of a team: addresses of its own programs, each with a secret that signs what is sent there. */
import { error } from '@sveltejs/kit';
import { and, asc, count, eq, sql } from 'drizzle-orm';
import { OVERLAP_HOURS, WEBHOOK_LIMIT, type NewWebhook } from '../domain/webhooks';
import { db, type Executor } from './db';
import { teams, webhooks } from './db/schema';
import { recordEvent } from './events';
import { notFound, require, type Member } from './member';
import { seal, unseal } from './sealing';
import { makeSecret } from './secrets';
import { checkAddress, type Resolve } from './webhook-addresses';
import { dropWaiting, limitSendingByHand, queueDelivery } from './webhook-messages';

/** Begins every secret, so that one that leaked into a file is found by looking for it. */
const PREFIX = 'windlass_hook_';
const PURPOSE = 'webhook secret';

/** What is told once about a new webhook, or about a new secret of one. */
export interface MadeWebhook {
  readonly id: string;
  readonly name: string;
  readonly secret: string;
}

/** The team's webhooks, the oldest first, without their secrets. */
export function list(member: Member) {
  require(member, 'manage webhooks');
  return db
    .select({
      id: webhooks.id,
      name: webhooks.name,
      url: webhooks.url,
      isOn: webhooks.isOn,
      failingSince: webhooks.failingSince,
      givenUpAt: webhooks.givenUpAt,
      previousUntil:
        sql<Date | null>`case when ${webhooks.previousUntil} > now() then ${webhooks.previousUntil} end`.mapWith(
          webhooks.previousUntil,
        ),
      createdAt: webhooks.createdAt,
    })
    .from(webhooks)
    .where(eq(webhooks.teamId, member.teamId))
    .orderBy(asc(webhooks.createdAt), asc(webhooks.id));
}

/** One webhook of the team; 404 where there is none such. */
export async function get(member: Member, webhookId: string) {
  const found = (await list(member)).find(({ id }) => id === webhookId);
  return found ?? notFound('webhook');
}

/** Adds a webhook and answers its secret, which is told only now. Throws AddressRefused for a wrong address. */
export async function create(
  member: Member,
  { name, url }: NewWebhook,
  resolve?: Resolve,
): Promise<MadeWebhook> {
  require(member, 'manage webhooks');
  await checkAddress(url, resolve);
  const secret = `${PREFIX}${makeSecret()}`;
  return db.transaction(async (tx) => {
    // Two leads at once must not get past the limit together.
    await tx.select().from(teams).where(eq(teams.id, member.teamId)).for('no key update');
    const [{ there }] = await tx
      .select({ there: count() })
      .from(webhooks)
      .where(eq(webhooks.teamId, member.teamId));
    if (there >= WEBHOOK_LIMIT) {
      error(409, `A team has at most ${WEBHOOK_LIMIT} webhooks. Remove one first.`);
    }
    const [{ id }] = await tx
      .insert(webhooks)
      .values({
        teamId: member.teamId,
        createdBy: member.userId,
        name,
        url,
        secret: seal(secret, PURPOSE, member.teamId),
      })
      .returning({ id: webhooks.id });
    await record(tx, member, 'add webhook', { id, name, url });
    return { id, name, secret };
  });
}

/** The record names the host only: addresses often carry secrets of their receivers. */
async function record(
  executor: Executor,
  member: Member,
  action: string,
  { id, name, url }: { readonly id: string; readonly name: string; readonly url: string },
): Promise<void> {
  const host = new URL(url).host;
  await recordEvent(executor, member, action, `webhook:${id}`, { name, host });
}

const own = (member: Member, webhookId: string) =>
  and(eq(webhooks.id, webhookId), eq(webhooks.teamId, member.teamId));

/** Switches a webhook on or off; what still waited for it is given up when it goes off. */
export async function switchTo(member: Member, webhookId: string, isOn: boolean): Promise<void> {
  require(member, 'manage webhooks');
  await db.transaction(async (tx) => {
    const [changed] = await tx
      .update(webhooks)
      .set({ isOn, givenUpAt: null, failingSince: null })
      .where(own(member, webhookId))
      .returning();
    if (!changed) notFound('webhook');
    if (!isOn)
      await dropWaiting(tx, webhookId, 'The webhook was switched off before this was sent.');
    await record(tx, member, isOn ? 'switch webhook on' : 'switch webhook off', changed);
  });
}

/** Makes a new secret; the one before signs beside it for a day, so that receivers can change over. */
export async function renewSecret(member: Member, webhookId: string): Promise<MadeWebhook> {
  require(member, 'manage webhooks');
  const secret = `${PREFIX}${makeSecret()}`;
  return db.transaction(async (tx) => {
    const [changed] = await tx
      .update(webhooks)
      .set({
        previousSecret: webhooks.secret,
        previousUntil: sql`now() + make_interval(hours => ${OVERLAP_HOURS})`,
        secret: seal(secret, PURPOSE, member.teamId),
      })
      .where(own(member, webhookId))
      .returning();
    if (!changed) notFound('webhook');
    await record(tx, member, 'renew webhook secret', changed);
    return { id: webhookId, name: changed.name, secret };
  });
}

/** Removes a webhook with its log. */
export async function remove(member: Member, webhookId: string): Promise<void> {
  require(member, 'manage webhooks');
  await db.transaction(async (tx) => {
    const [removed] = await tx.delete(webhooks).where(own(member, webhookId)).returning();
    if (!removed) notFound('webhook');
    await record(tx, member, 'remove webhook', removed);
  });
}

/** Sends a test, also to a webhook that is off; answers the delivery's id. */
export async function sendTest(member: Member, webhookId: string): Promise<string> {
  require(member, 'manage webhooks');
  await limitSendingByHand(member);
  return db.transaction(async (tx) => {
    const [found] = await tx
      .select({ id: webhooks.id, team: { id: teams.id, name: teams.name } })
      .from(webhooks)
      .innerJoin(teams, eq(teams.id, webhooks.teamId))
      .where(own(member, webhookId));
    if (!found) notFound('webhook');
    const at = new Date().toISOString();
    return queueDelivery(tx, found.id, { event: 'webhook.test', at, team: found.team });
  });
}

/** What signs at this moment, the present secret first; empty where AUTH_SECRET is another one than it was. */
export function openSecrets(row: {
  readonly teamId: string;
  readonly secret: string;
  readonly previousSecret: string | null;
  readonly previousUntil: Date | null;
}): string[] {
  const isOverlap = row.previousUntil !== null && row.previousUntil.getTime() > Date.now();
  const sealed = isOverlap ? [row.secret, row.previousSecret] : [row.secret];
  try {
    return sealed.flatMap((each) => (each ? unseal(each, PURPOSE, row.teamId) : []));
  } catch {
    return [];
  }
}
