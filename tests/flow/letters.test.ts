/** Letters: each arrives once, whatever happens to workers and mail servers, and leaves no secret behind. */
import type { ChildProcess } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { db } from '$lib/server/db';
import { letters } from '$lib/server/db/schema';
import { environment } from '$lib/server/environment';
import { deliver, deliverWaiting, NotNow, report, settle } from '$lib/server/letter-delivery';
import { post, postWithin, type Letter } from '$lib/server/mail';
import { stopQueue } from '$lib/server/queue';
import { startMailServer, type MailServer } from '../support/mail-server';
import { until } from '../support/until';
import { killWorker, startWorker } from '../support/worker';

const address = () => `${randomUUID().slice(0, 8)}@people.example`;
const letter: Letter = { subject: 'A letter', text: 'secret', html: '<p>secret</p>' };

let server: MailServer;
beforeAll(async () => {
  server = await startMailServer();
});
beforeEach(() => {
  environment.WINDLASS_SMTP_URL = server.url;
  process.env['WINDLASS_SMTP_URL'] = server.url;
});
afterEach(() => {
  server.refuse(null);
  server.hold(null);
});
afterAll(async () => {
  await stopQueue();
  await server.stop();
});

/** Puts a letter into the queue and answers its row's id. */
async function write(to: string, given = letter): Promise<string> {
  await db.transaction((tx) => postWithin(tx, to, given));
  const [row] = await db.select().from(letters).where(eq(letters.address, to));
  return row.id;
}
const rowOf = async (id: string) => (await db.select().from(letters).where(eq(letters.id, id)))[0];
const takenBy = (to: string) => server.taken.filter((taken) => taken.to === to);
const ended = (id: string) =>
  until('the letter to end', async () => (await rowOf(id)).endedAt !== null && rowOf(id), 110);

describe('a letter', () => {
  it('is handed in once, under a name of its own, and its body is erased', async () => {
    const to = address();
    const id = await write(to);
    await deliverWaiting();
    await deliverWaiting();
    await deliver(id);
    expect(takenBy(to)).toEqual([{ to, subject: 'A letter', messageId: `<${id}@127.0.0.1>` }]);
    expect(await rowOf(id)).toMatchObject({ state: 'sent', text: null, html: null, attempt: 1 });
  });

  it('that is posted without a transaction is in the queue soon', async () => {
    const to = address();
    post(to, letter);
    await until('the letter to be stored', async () => {
      const rows = await db.select().from(letters).where(eq(letters.address, to));
      return rows.length === 1;
    });
    await deliverWaiting();
    expect(takenBy(to)).toHaveLength(1);
  });

  it('of a transaction that is rolled back never goes out', async () => {
    const to = address();
    const failing = db.transaction(async (tx) => {
      await postWithin(tx, to, letter);
      throw new Error('rolled back');
    });
    await expect(failing).rejects.toThrow('rolled back');
    await deliverWaiting();
    expect(takenBy(to)).toEqual([]);
    const jobs = await db.execute(
      sql`select 1 from pgboss.job where name = 'letters' and state < 'active' and data->>'letterId' not in (select id::text from letters)`,
    );
    expect(jobs).toHaveLength(0);
  });

  it('waits while the mail server is down, and arrives once it is up', async () => {
    const to = address();
    const later = await startMailServer();
    const port = Number(new URL(later.url).port);
    await later.stop();
    environment.WINDLASS_SMTP_URL = later.url;
    const id = await write(to);
    await expect(deliver(id)).rejects.toThrow(NotNow);
    const waiting = await rowOf(id);
    expect(waiting).toMatchObject({ state: 'waiting', text: 'secret' });
    expect(waiting.reason).toContain('ECONNREFUSED');
    const up = await startMailServer(port);
    await deliver(id);
    expect(up.taken).toHaveLength(1);
    expect(await rowOf(id)).toMatchObject({ state: 'sent', text: null, attempt: 2 });
    await up.stop();
  });

  it('is tried again after a passing refusal and given up after a final one, with the reason', async () => {
    const id = await write(address());
    server.refuse(450);
    await expect(deliver(id)).rejects.toThrow(NotNow);
    expect(await rowOf(id)).toMatchObject({ state: 'waiting', text: 'secret' });
    server.refuse(550);
    await deliver(id);
    const row = await rowOf(id);
    expect(row).toMatchObject({ state: 'given-up', text: null, html: null });
    expect(row.reason).toContain('no such box');
    const { counts, failed } = await report();
    expect(counts['given-up']).toBeGreaterThan(0);
    expect(failed).toContainEqual(expect.objectContaining({ id, reason: row.reason }));
  });

  it('is not sent any more once its link has stopped working', async () => {
    const to = address();
    const id = await write(to, { ...letter, hours: 1 });
    await db
      .update(letters)
      .set({ expiresAt: sql`now() - interval '1 second'` })
      .where(eq(letters.id, id));
    await deliver(id);
    expect(takenBy(to)).toEqual([]);
    expect(await rowOf(id)).toMatchObject({ state: 'expired', text: null, html: null });
  });

  it('is handed in by one of two that try at the same moment', async () => {
    const to = address();
    const id = await write(to);
    await Promise.all([deliver(id), deliver(id), deliver(id)]);
    expect(takenBy(to)).toHaveLength(1);
    expect(await rowOf(id)).toMatchObject({ state: 'sent' });
  });

  it('whose answer never came is not sent again', async () => {
    const to = address();
    const id = await write(to);
    server.hold('after the body');
    void deliver(id).catch(() => undefined);
    await until('the body to arrive', async () => takenBy(to).length === 1);
    // Another worker that gets the same letter leaves it alone.
    await deliver(id);
    await settle();
    expect(await rowOf(id)).toMatchObject({ state: 'handing-in' });
    await db
      .update(letters)
      .set({ claimedAt: sql`now() - interval '1 hour'` })
      .where(eq(letters.id, id));
    await settle();
    await deliver(id);
    expect(takenBy(to)).toHaveLength(1);
    expect(await rowOf(id)).toMatchObject({ state: 'unsure', text: null, html: null });
  });
});

describe('workers', () => {
  let workers: ChildProcess[] = [];
  afterEach(async () => {
    for (const worker of workers) await killWorker(worker);
    workers = [];
  });
  const start = () => {
    const worker = startWorker();
    workers.push(worker);
    return worker;
  };

  it('share the letters, and each arrives once', { timeout: 120_000 }, async () => {
    start();
    start();
    const people = Array.from({ length: 30 }, address);
    const ids = await Promise.all(people.map((to) => write(to)));
    for (const id of ids) await ended(id);
    const arrived = server.taken.filter(({ to }) => people.includes(to));
    expect(arrived.map(({ to }) => to).sort()).toEqual([...people].sort());
    expect(new Set(arrived.map(({ messageId }) => messageId)).size).toBe(30);
  });

  it('that are killed before the body went out lose no letter', { timeout: 150_000 }, async () => {
    server.hold('before the body');
    const worker = start();
    const to = address();
    const id = await write(to);
    await until('the letter to be held', async () => server.held() > 0);
    expect(await rowOf(id)).toMatchObject({ state: 'claimed' });
    await killWorker(worker);
    server.hold(null);
    start();
    expect(await ended(id)).toMatchObject({ state: 'sent', attempt: 2 });
    expect(takenBy(to)).toHaveLength(1);
  });

  it(
    'that are killed after the body went out send no letter twice',
    { timeout: 150_000 },
    async () => {
      server.hold('after the body');
      const worker = start();
      const to = address();
      const id = await write(to);
      await until('the body to arrive', async () => takenBy(to).length === 1);
      await killWorker(worker);
      server.hold(null);
      await db
        .update(letters)
        .set({ claimedAt: sql`now() - interval '1 hour'` })
        .where(eq(letters.id, id));
      start();
      expect(await ended(id)).toMatchObject({ state: 'unsure', text: null });
      expect(takenBy(to)).toHaveLength(1);
    },
  );
});
