/** Webhooks: signatures, addresses, attempts, the log, and one delivery for each finish. */
import { execFileSync } from 'node:child_process';
import { and, eq, sql } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it, vi } from 'vitest';
import { batchFinishedSchema, RETRY_WAITS } from '$lib/domain/webhooks';
import { perform } from '$lib/engine';
import { db } from '$lib/server/db';
import { events, tasks, webhookDeliveries, webhooks as rows } from '$lib/server/db/schema';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import * as results from '$lib/server/results';
import { cancel, claim, fail, rerun } from '$lib/server/tasks';
import { deliver } from '$lib/server/webhook-delivery';
import * as log from '$lib/server/webhook-log';
import * as webhooks from '$lib/server/webhooks';
import { performAll, submitPasted } from '../support/batches';
import { waitForLetter } from '../support/letters';
import { newTeam } from '../support/people';
import { startReceiver, status } from '../support/receiver';

vi.hoisted(() => {
  process.env['WINDLASS_WEBHOOK_NETWORKS'] = '127.0.0.0/8';
  process.env['WINDLASS_WEBHOOK_HTTP'] = 'on';
});

let receiver: Awaited<ReturnType<typeof startReceiver>>;
beforeAll(async () => {
  receiver = await startReceiver(status(204));
});
afterEach(() => {
  receiver.received.length = 0;
  receiver.answerWith(status(204));
});
afterAll(async () => {
  await receiver.stop();
  await stopQueue();
});

const add = (lead: Member, url = receiver.url) => webhooks.create(lead, { name: 'Ours', url });
const deliveriesOf = (lead: Member, id: string) => log.listDeliveries(lead, id, null, 100);
/** Carries out the attempt that is due, as a worker would. */
async function attempt(lead: Member, id: string, resolve?: Parameters<typeof deliver>[1]) {
  const [{ id: deliveryId, attempts }] = await deliveriesOf(lead, id);
  return deliver({ deliveryId, attempts }, resolve);
}

/** The signature by another implementation of HMAC than ours: OpenSSL's. */
function openssl(secret: string, text: string): string {
  const key = Buffer.from(secret).toString('hex');
  const args = ['dgst', '-sha256', '-mac', 'HMAC', '-macopt', `hexkey:${key}`];
  return execFileSync('openssl', args, { input: text, encoding: 'utf8' }).trim().split('= ')[1];
}

describe('a delivery', () => {
  it('carries a signature over time and body that others can verify', async () => {
    const { lead } = await newTeam();
    const { id, secret } = await add(lead);
    const delivery = await webhooks.sendTest(lead, id);
    expect(await attempt(lead, id)).toBe('delivered');
    const [{ headers, body, method }] = receiver.received;
    expect(method).toBe('POST');
    expect(headers).toMatchObject({
      'content-type': 'application/json',
      'windlass-event': 'webhook.test',
      'windlass-delivery': delivery,
    });
    expect(JSON.parse(body)).toMatchObject({ event: 'webhook.test', delivery });
    const timestamp = String(headers['windlass-timestamp']);
    expect(Math.abs(Date.now() / 1000 - Number(timestamp))).toBeLessThan(30);
    expect(headers['windlass-signature']).toBe(`v1=${openssl(secret, `${timestamp}.${body}`)}`);
  });

  it('is signed by the old and the new secret for a day, then by the new one only', async () => {
    const { lead } = await newTeam();
    const { id, secret: old } = await add(lead);
    const { secret } = await webhooks.renewSecret(lead, id);
    const signatures = async () => {
      await webhooks.sendTest(lead, id);
      await attempt(lead, id);
      const { headers, body } = receiver.received.at(-1)!;
      const signed = `${String(headers['windlass-timestamp'])}.${body}`;
      return {
        sent: String(headers['windlass-signature']).split(','),
        by: (key: string) => `v1=${openssl(key, signed)}`,
      };
    };
    const both = await signatures();
    expect(both.sent).toEqual([both.by(secret), both.by(old)]);
    await db
      .update(rows)
      .set({ previousUntil: sql`now() - interval '1 second'` })
      .where(eq(rows.id, id));
    const one = await signatures();
    expect(one.sent).toEqual([one.by(secret)]);
  });

  it('is tried again after faults, each time later, and given up after about a day', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    await finishBatch(lead);
    receiver.answerWith(status(500));
    const waits: number[] = [];
    for (let n = 0; n <= RETRY_WAITS.length; n += 1) {
      expect(await attempt(lead, id)).toBe('failed');
      const [{ attempts, nextAt, attemptedAt, status: code, reason }] = await deliveriesOf(
        lead,
        id,
      );
      expect({ attempts, code }).toEqual({ attempts: n + 1, code: 500 });
      expect(reason).toContain('The answer was 500');
      if (nextAt) waits.push((nextAt.getTime() - attemptedAt!.getTime()) / 1000);
    }
    expect(waits).toEqual([...RETRY_WAITS]);
    const total = waits.reduce((sum, wait) => sum + wait, 0) / 3600;
    expect(total).toBeGreaterThan(20);
    expect(total).toBeLessThan(28);
    expect((await deliveriesOf(lead, id))[0].state).toBe('failed');
    expect(receiver.received).toHaveLength(RETRY_WAITS.length + 1);
  });

  it('is done once the receiver takes it, and the webhook counts as well again', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    await finishBatch(lead);
    receiver.answerWith((response) => response.destroy());
    await attempt(lead, id);
    expect((await deliveriesOf(lead, id))[0].reason).toContain('cut before the answer');
    expect((await webhooks.get(lead, id)).failingSince).not.toBeNull();
    receiver.answerWith(status(200));
    expect(await attempt(lead, id)).toBe('delivered');
    expect((await webhooks.get(lead, id)).failingSince).toBeNull();
    expect((await deliveriesOf(lead, id))[0]).toMatchObject({
      state: 'delivered',
      attempts: 2,
      status: 200,
      reason: '',
      nextAt: null,
    });
    // A job that was overtaken does nothing.
    const [{ id: deliveryId }] = await deliveriesOf(lead, id);
    expect(await deliver({ deliveryId, attempts: 1 })).toBe('none');
    expect(receiver.received).toHaveLength(2);
  });

  it('waits ten seconds for an answer, and not longer', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    await webhooks.sendTest(lead, id);
    receiver.answerWith(() => undefined);
    expect(await attempt(lead, id)).toBe('failed');
    const [{ reason, milliseconds }] = await deliveriesOf(lead, id);
    expect(reason).toBe('There was no whole answer within 10 seconds.');
    expect(milliseconds).toBeGreaterThan(9_000);
  });

  it('reads only the beginning of an endless answer', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    await webhooks.sendTest(lead, id);
    receiver.answerWith((response) => {
      response.writeHead(200);
      const timer = setInterval(() => response.write('x'.repeat(4096)), 5);
      response.on('close', () => clearInterval(timer));
    });
    expect(await attempt(lead, id)).toBe('delivered');
  });

  it('follows no redirect', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    await webhooks.sendTest(lead, id);
    receiver.answerWith(status(307, { location: '/elsewhere' }));
    expect(await attempt(lead, id)).toBe('failed');
    expect(receiver.received.map(({ path }) => path)).toEqual(['/hook']);
    expect((await deliveriesOf(lead, id))[0]).toMatchObject({ status: 307, state: 'failed' });
  });
});

describe('an address', () => {
  const named = (port: number) => `http://hooks.example:${port}/hook`;

  it('is looked up once for an attempt, and the connection goes where the check went', async () => {
    const { lead } = await newTeam();
    const url = named(receiver.port);
    const { id } = await webhooks.create(lead, { name: 'Named', url }, async () => ['127.0.0.1']);
    await webhooks.sendTest(lead, id);
    const asked: string[] = [];
    const changing = async (host: string) => {
      asked.push(host);
      // The first answer is allowed; a second one would be the attack.
      return asked.length === 1 ? ['127.0.0.1'] : ['10.0.0.1'];
    };
    expect(await attempt(lead, id, changing)).toBe('delivered');
    expect(asked).toEqual(['hooks.example']);
    expect(receiver.received[0].headers.host).toBe(`hooks.example:${receiver.port}`);
  });

  it('is checked again at every attempt, with all the addresses that its name has', async () => {
    const { lead } = await newTeam();
    const url = named(receiver.port);
    const { id } = await webhooks.create(lead, { name: 'Named', url }, async () => ['127.0.0.1']);
    for (const addresses of [['10.0.0.1'], ['127.0.0.1', '169.254.169.254'], ['::1']]) {
      await webhooks.sendTest(lead, id);
      expect(await attempt(lead, id, async () => addresses)).toBe('failed');
      expect((await deliveriesOf(lead, id))[0].reason).toContain('private or reserved network');
    }
    expect(receiver.received).toEqual([]);
  });

  it('that leads to a private network is not saved', async () => {
    const { lead } = await newTeam();
    const create = (url: string) => webhooks.create(lead, { name: 'Bad', url });
    await expect(create('https://10.0.0.7/hook')).rejects.toThrow('private or reserved');
    await expect(create('https://[::ffff:7f00:1]/hook')).rejects.toThrow('private or reserved');
    await expect(
      webhooks.create(lead, { name: 'Bad', url: 'https://a.example/' }, async () => ['fd00::1']),
    ).rejects.toThrow('private or reserved');
    await expect(
      webhooks.create(lead, { name: 'Bad', url: 'https://a.example/' }, () =>
        Promise.reject(new Error('ENOTFOUND')),
      ),
    ).rejects.toThrow('cannot be looked up');
    expect(await webhooks.list(lead)).toEqual([]);
  });
});

/** Submits and computes one small molecule for the lead's team. */
async function finishBatch(member: Member): Promise<string> {
  const batchId = await submitPasted(member, 'CCO ethanol', { conformers: {} });
  await performAll(batchId);
  return batchId;
}
async function result(task: NonNullable<Awaited<ReturnType<typeof claim>>>) {
  return perform(results.requestOf(task), {
    now: () => performance.now(),
    breathe: () => Promise.resolve(),
  });
}
const finishes = async (lead: Member, id: string) =>
  (await deliveriesOf(lead, id)).filter(({ event }) => event === 'batch.finished').length;

describe('batch.finished', () => {
  it('says what ended, as its schema has it', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    const batchId = await finishBatch(lead);
    await attempt(lead, id);
    const message = batchFinishedSchema.parse(JSON.parse(receiver.received[0].body));
    expect(message.team.id).toBe(lead.teamId);
    expect(message.batch).toMatchObject({
      id: batchId,
      counts: { done: 1, failed: 0, cancelled: 0 },
    });
    expect(message.batch.page).toMatch(new RegExp(`/batches/${batchId}$`));
  });

  it('is told once when two workers end the last two tasks at the same moment', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    const error = { code: 'internal-error', message: 'A test.' };
    for (let round = 1; round <= 12; round += 1) {
      const batchId = await submitPasted(lead, 'CCO one\nCCN two', { conformers: {} });
      const open = await db.select().from(tasks).where(eq(tasks.batchId, batchId));
      const [one, two] = await Promise.all(open.map((task) => claim(task.id, `worker ${task.id}`)));
      // The second failing of the first task comes from a worker that lost it.
      await Promise.all([fail(one!, error), fail(two!, error), fail(one!, error)]);
      expect(await finishes(lead, id)).toBe(round);
    }
  });

  it('is told again when what failed was run again and ended again', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    const batchId = await submitPasted(lead, 'CCO', { conformers: {} });
    const [{ id: taskId }] = await db.select().from(tasks).where(eq(tasks.batchId, batchId));
    const first = await claim(taskId, 'a test');
    await fail(first!, { code: 'internal-error', message: 'A test.' });
    expect(await finishes(lead, id)).toBe(1);
    await rerun(lead, { batchId });
    await performAll(batchId);
    expect(await finishes(lead, id)).toBe(2);
  });

  it('is told when the rest is cancelled, and when everything was there already', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    const cancelled = await submitPasted(lead, 'CCO\nCCN', { conformers: {} });
    await cancel(lead, { batchId: cancelled });
    expect(await finishes(lead, id)).toBe(1);
    await finishBatch(lead);
    await submitPasted(lead, 'CCO', { conformers: {} });
    expect(await finishes(lead, id)).toBe(3);
  });

  it('is not told while anything is open, to other teams, or to a webhook that is off', async () => {
    const { lead } = await newTeam();
    const other = (await newTeam()).lead;
    const { id } = await add(lead);
    const { id: foreign } = await add(other);
    const batchId = await submitPasted(lead, 'CCO\nCCN', { conformers: {} });
    const [first] = await db.select().from(tasks).where(eq(tasks.batchId, batchId));
    const task = await claim(first.id, 'a test');
    await results.store(task!, await result(task!));
    expect(await finishes(lead, id)).toBe(0);
    await webhooks.switchTo(lead, id, false);
    await performAll(await submitPasted(lead, 'CCC', { conformers: {} }));
    expect(await finishes(lead, id)).toBe(0);
    expect(await finishes(other, foreign)).toBe(0);
  });

  it('vanishes with the transaction that ends the task', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    const batchId = await submitPasted(lead, 'CCO', { conformers: {} });
    const [{ id: taskId }] = await db.select().from(tasks).where(eq(tasks.batchId, batchId));
    const task = await claim(taskId, 'a test');
    const answer = await result(task!);
    await cancel(lead, { batchId });
    // Told by the cancelling; the worker that comes too late tells nothing.
    expect(await results.store(task!, answer)).toBe(false);
    expect(await finishes(lead, id)).toBe(1);
  });
});

describe('the log', () => {
  it('lets a delivery be sent again under its old number', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    await finishBatch(lead);
    await attempt(lead, id);
    const [{ id: deliveryId }] = await deliveriesOf(lead, id);
    await log.redeliver(lead, deliveryId);
    expect(await attempt(lead, id)).toBe('delivered');
    expect(receiver.received.map(({ body }) => body)).toEqual([
      receiver.received[0].body,
      receiver.received[0].body,
    ]);
    expect(await deliveriesOf(lead, id)).toMatchObject([{ attempts: 2, state: 'delivered' }]);
  });

  it('is not for other teams or lower roles, and a webhook that is off sends nothing again', async () => {
    const { lead, modeler } = await newTeam();
    const stranger = (await newTeam()).lead;
    const { id } = await add(lead);
    await finishBatch(lead);
    await attempt(lead, id);
    const [{ id: deliveryId }] = await deliveriesOf(lead, id);
    await expect(deliveriesOf(stranger, id)).rejects.toMatchObject({ status: 404 });
    await expect(log.redeliver(stranger, deliveryId)).rejects.toMatchObject({ status: 404 });
    await expect(webhooks.remove(stranger, id)).rejects.toMatchObject({ status: 404 });
    await expect(webhooks.renewSecret(stranger, id)).rejects.toMatchObject({ status: 404 });
    await expect(webhooks.sendTest(stranger, id)).rejects.toMatchObject({ status: 404 });
    await expect(deliveriesOf(modeler, id)).rejects.toMatchObject({ status: 403 });
    await expect(add(modeler)).rejects.toMatchObject({ status: 403 });
    await webhooks.switchTo(lead, id, false);
    await expect(log.redeliver(lead, deliveryId)).rejects.toMatchObject({ status: 409 });
  });

  it('is forgotten after thirty days', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    await webhooks.sendTest(lead, id);
    await webhooks.sendTest(lead, id);
    const [{ id: old }] = await deliveriesOf(lead, id);
    await db
      .update(webhookDeliveries)
      .set({ createdAt: sql`now() - interval '31 days'` })
      .where(eq(webhookDeliveries.id, old));
    await log.forgetOld();
    const left = await deliveriesOf(lead, id);
    expect(left).toHaveLength(1);
    expect(left[0].id).not.toBe(old);
  });

  it('picks up what a worker left in the middle, and what lost its job', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    const deliveryId = await webhooks.sendTest(lead, id);
    const began = (seconds: number) =>
      db
        .update(webhookDeliveries)
        .set({
          startedAt: sql`now() - make_interval(secs => ${seconds})`,
          nextAt: sql`now() - make_interval(secs => ${seconds})`,
        })
        .where(eq(webhookDeliveries.id, deliveryId));
    await began(5);
    await expect(deliver({ deliveryId, attempts: 0 })).rejects.toThrow('in another worker');
    expect(await log.requeueStranded()).toBe(0);
    await began(3600);
    expect(await log.requeueStranded()).toBe(1);
    await began(60);
    expect(await deliver({ deliveryId, attempts: 0 })).toBe('delivered');
  });
});

describe('a webhook', () => {
  it('is one of at most five in a team, also when leads hurry', async () => {
    const { lead } = await newTeam();
    const tries = await Promise.allSettled(Array.from({ length: 9 }, () => add(lead)));
    expect(tries.filter((one) => one.status === 'fulfilled')).toHaveLength(5);
    expect(await webhooks.list(lead)).toHaveLength(5);
  });

  it('keeps its secret sealed, and says when it cannot be opened any more', async () => {
    const { lead } = await newTeam();
    const { id, secret } = await add(lead);
    const [row] = await db.select().from(rows).where(eq(rows.id, id));
    expect(JSON.stringify(row)).not.toContain(secret);
    await db
      .update(rows)
      .set({ secret: `${row.secret.slice(0, -4)}AAAA` })
      .where(eq(rows.id, id));
    await webhooks.sendTest(lead, id);
    expect(await attempt(lead, id)).toBe('failed');
    expect((await deliveriesOf(lead, id))[0].reason).toContain('AUTH_SECRET');
    expect(receiver.received).toEqual([]);
  });

  it('is switched off after seven days of failures, and the leads get a letter', async () => {
    const { lead } = await newTeam();
    const { id } = await add(lead);
    receiver.answerWith(status(503));
    await finishBatch(lead);
    const failingFor = (days: number) =>
      db
        .update(rows)
        .set({ failingSince: sql`now() - make_interval(days => ${days})` })
        .where(eq(rows.id, id));
    await failingFor(6);
    await attempt(lead, id);
    expect((await webhooks.get(lead, id)).isOn).toBe(true);
    await failingFor(8);
    await attempt(lead, id);
    const after = await webhooks.get(lead, id);
    expect(after).toMatchObject({ isOn: false });
    expect(after.givenUpAt).not.toBeNull();
    expect((await deliveriesOf(lead, id))[0].state).toBe('failed');
    const [{ email }] = await db.execute<{ email: string }>(
      sql`select email from users where id = ${lead.userId}`,
    );
    const [{ name }] = await db.execute<{ name: string }>(
      sql`select name from teams where id = ${lead.teamId}`,
    );
    const letter = await waitForLetter(
      inject('mail').lettersUrl,
      email,
      `A webhook of ${name} was switched off`,
    );
    expect(letter.text).toContain('The answer was 503');
    await webhooks.switchTo(lead, id, true);
    expect(await webhooks.get(lead, id)).toMatchObject({ isOn: true, failingSince: null });
  });

  it('leaves lines in the record, without its secrets', async () => {
    const { lead } = await newTeam();
    const url = `${receiver.url}?key=hidden`;
    const { id, secret } = await add(lead, url);
    await webhooks.renewSecret(lead, id);
    await webhooks.switchTo(lead, id, false);
    await webhooks.remove(lead, id);
    const lines = await db
      .select()
      .from(events)
      .where(and(eq(events.teamId, lead.teamId), eq(events.subject, `webhook:${id}`)));
    expect(lines.map(({ action }) => action)).toEqual([
      'add webhook',
      'renew webhook secret',
      'switch webhook off',
      'remove webhook',
    ]);
    expect(JSON.stringify(lines)).not.toContain('hidden');
    expect(JSON.stringify(lines)).not.toContain(secret);
  });
});
