/** Operating the machines: workers that pause, resume and drain, failed tasks queued again, metrics, and who may see it. */
import { once } from 'node:events';
import { eq, inArray, sql } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import { db } from '$lib/server/db';
import { operatorEvents, tasks, users, webhookDeliveries } from '$lib/server/db/schema';
import type { Member } from '$lib/server/member';
import { readMetrics } from '$lib/server/metrics-page';
import * as operation from '$lib/server/operation';
import { orderWorker, requeueReason, requeueTask } from '$lib/server/operator-actions';
import { listOperators, setOperator, whoOperates } from '$lib/server/operators';
import { stopQueue } from '$lib/server/queue';
import { readDatabaseState } from '$lib/server/ready';
import { cancel, claim, fail } from '$lib/server/tasks';
import { listWorkers, type WorkerState } from '$lib/server/workers';
import * as webhooks from '$lib/server/webhooks';
import { submitPasted } from '../support/batches';
import { newTeam } from '../support/people';
import { startReceiver, status } from '../support/receiver';
import { until } from '../support/until';
import { killWorker, startWorker } from '../support/worker';

vi.hoisted(() => {
  process.env['WINDLASS_WEBHOOK_NETWORKS'] = '127.0.0.0/8';
  process.env['WINDLASS_WEBHOOK_HTTP'] = 'on';
});

const running: ReturnType<typeof startWorker>[] = [];
let receiver: Awaited<ReturnType<typeof startReceiver>>;
beforeAll(async () => {
  receiver = await startReceiver(status(204));
});
afterEach(async () => {
  for (const worker of running.splice(0)) await killWorker(worker);
});
afterAll(async () => {
  await receiver.stop();
  await stopQueue();
});

/** A search that would take minutes, and a small one. */
const longChain = `${'CC(O)'.repeat(7)}C`;
const long = { conformers: { effort: 'thorough', window: 50, limit: 1000 } };
const short = { conformers: {} };

async function newOperator() {
  const { lead } = await newTeam();
  await db.update(users).set({ isOperator: true }).where(eq(users.id, lead.userId));
  return { userId: lead.userId, address: '192.0.2.9' };
}

/** A worker of its own process that takes tasks, by name. */
async function newWorker() {
  const before = new Set((await listWorkers()).map(({ name }) => name));
  const child = startWorker();
  running.push(child);
  const found = await until('the worker to show itself', async () =>
    (await listWorkers()).find(({ name, state }) => state === 'taking' && !before.has(name)),
  );
  return { child, name: found.name };
}
const isIn = (name: string, state: WorkerState) => async () =>
  (await listWorkers()).some((worker) => worker.name === name && worker.state === state);
const stateOf = async (batchId: string) =>
  (await db.select({ state: tasks.state }).from(tasks).where(eq(tasks.batchId, batchId))).map(
    ({ state }) => state,
  );
const becomes = (batchId: string, state: string) =>
  until(`the batch to be ${state}`, async () =>
    (await stateOf(batchId)).every((each) => each === state),
  );

describe('a worker', () => {
  it(
    'pauses with what it is on going on, takes tasks again when resumed, and ends when drained',
    { timeout: 180_000 },
    async () => {
      const operator = await newOperator();
      const { modeler } = await newTeam();
      const { child, name } = await newWorker();
      const begun = await submitPasted(modeler, longChain, long);
      await becomes(begun, 'running');

      expect(await orderWorker(operator, name, 'pause')).toBe(true);
      await until('the worker to pause', isIn(name, 'paused'));
      const waiting = await submitPasted(modeler, 'CCO', short);
      const [{ beatAt }] = await operation.runningTasks();
      // Its task lives on through several signs of life, and the new one is left alone all the while.
      await until('the task to go on', async () => {
        const [task] = await operation.runningTasks();
        return task.beatAt!.getTime() - beatAt!.getTime() > 7_000;
      });
      expect(await stateOf(waiting)).toEqual(['queued']);
      expect(await stateOf(begun)).toEqual(['running']);

      await orderWorker(operator, name, 'take');
      await until('the worker to take tasks', isIn(name, 'taking'));
      await becomes(waiting, 'done');
      expect(await stateOf(begun)).toEqual(['running']);

      const gone = once(child, 'exit');
      await orderWorker(operator, name, 'drain');
      await until('the worker to drain', isIn(name, 'draining'));
      const late = await submitPasted(modeler, 'CCN', short);
      expect(child.exitCode).toBeNull();
      await cancel(modeler, { batchId: begun });
      expect(await gone).toEqual([0, null]);
      expect(await stateOf(late)).toEqual(['queued']);
      expect(await isIn(name, 'gone')()).toBe(true);
      expect(await orderWorker(operator, name, 'take')).toBe(false);
      const lines = await db
        .select()
        .from(operatorEvents)
        .where(eq(operatorEvents.actorId, operator.userId));
      expect(lines.map(({ action, subject }) => [action, subject])).toEqual([
        ['pause worker', `worker:${name}`],
        ['resume worker', `worker:${name}`],
        ['drain worker', `worker:${name}`],
      ]);
      await cancel(modeler, { batchId: late });
    },
  );

  it(
    'that is killed in the middle of a delivery loses nothing: another one sends it',
    { timeout: 120_000 },
    async () => {
      const { lead } = await newTeam();
      const { id } = await webhooks.create(lead, { name: 'Ours', url: receiver.url });
      // No answer: the first worker hangs on it when it is killed.
      receiver.answerWith(() => undefined);
      const { child } = await newWorker();
      const deliveryId = await webhooks.sendTest(lead, id);
      await until('the message to come', () => Promise.resolve(receiver.received.length > 0));
      receiver.answerWith(status(200));
      await killWorker(child);
      await newWorker();
      const row = await until(
        'the delivery to end',
        async () => {
          const [found] = await db
            .select()
            .from(webhookDeliveries)
            .where(eq(webhookDeliveries.id, deliveryId));
          return found.state !== 'waiting' && found;
        },
        90,
      );
      expect(row).toMatchObject({ state: 'delivered', attempts: 1, status: 200 });
      const numbers = receiver.received.map(({ headers }) => headers['windlass-delivery']);
      expect(new Set(numbers)).toEqual(new Set([deliveryId]));
    },
  );
});

/** A batch of which every task failed for a reason. */
async function failedBatch(member: Member, text: string, code: string): Promise<string[]> {
  const batchId = await submitPasted(member, text, short);
  const rows = await db.select({ id: tasks.id }).from(tasks).where(eq(tasks.batchId, batchId));
  for (const { id } of rows) {
    const task = await claim(id, 'a test');
    await fail(task!, { code, message: 'A test.' });
  }
  return rows.map(({ id }) => id);
}

describe('failed tasks', () => {
  it('are queued again where machine or program failed, one or all of a reason, and no others', async () => {
    const operator = await newOperator();
    const { modeler } = await newTeam();
    const lost = await failedBatch(modeler, 'CCO\nCCN\nCCC', 'worker-lost');
    const [slow] = await failedBatch(modeler, 'CCCO', 'time-limit');
    const [bad] = await failedBatch(modeler, 'CCCN', 'unsupported-environment');
    expect(await requeueTask(operator, lost[0])).toBe(1);
    expect(await requeueTask(operator, lost[0])).toBe(0);
    expect(await requeueTask(operator, bad)).toBe(0);
    const [one, two] = await Promise.all([
      requeueReason(operator, 'worker-lost'),
      requeueReason(operator, 'worker-lost'),
    ]);
    expect(one + two).toBe(2);
    const rows = await db
      .select({ id: tasks.id, state: tasks.state, error: tasks.error })
      .from(tasks)
      .where(inArray(tasks.id, [...lost, slow, bad]));
    const stateNow = (id: string) => rows.find((row) => row.id === id)!.state;
    expect([...lost, slow, bad].map(stateNow)).toEqual([
      'queued',
      'queued',
      'queued',
      'failed',
      'failed',
    ]);
    // A worker can take it: its job is in the queue again.
    expect((await claim(lost[1], 'a test'))?.attempt).toBe(2);
    for (const { batchId } of await db
      .selectDistinct({ batchId: tasks.batchId })
      .from(tasks)
      .where(inArray(tasks.id, lost))) {
      await cancel(modeler, { batchId });
    }
  });

  it('are counted by reason for a day and a week', async () => {
    const { modeler } = await newTeam();
    const ids = await failedBatch(modeler, 'CCF\nCCCl\nCCBr', 'no-such-thing');
    const age = (id: string, hours: number) =>
      db
        .update(tasks)
        .set({ finishedAt: sql`now() - make_interval(hours => ${hours})` })
        .where(eq(tasks.id, id));
    await age(ids[1], 30);
    await age(ids[2], 24 * 8);
    const found = (await operation.failuresByReason()).find(
      ({ reason }) => reason === 'no-such-thing',
    );
    expect(found).toEqual({ reason: 'no-such-thing', day: 1, week: 2 });
  });
});

describe('the operator’s page', () => {
  const asks = (user: object | null) => () =>
    whoOperates({
      locals: { user } as unknown as App.Locals,
      getClientAddress: () => '192.0.2.9',
    });

  it('is not there for anybody else', () => {
    const person = { id: 'a', email: 'a@people.example', name: 'A' };
    expect(asks(null)).toThrow(expect.objectContaining({ status: 404 }));
    expect(asks({ ...person, isOperator: false })).toThrow(
      expect.objectContaining({ status: 404 }),
    );
    expect(asks({ ...person, isOperator: true })()).toEqual({ userId: 'a', address: '192.0.2.9' });
  });

  it('is opened and closed for a person on the command line, which the record keeps', async () => {
    const { chemist } = await newTeam();
    const [{ email }] = await db.select().from(users).where(eq(users.id, chemist.userId));
    expect(await setOperator(` ${email.toUpperCase()} `, true)).toBe('changed');
    expect(await setOperator(email, true)).toBe('was so already');
    expect(await listOperators()).toContain(email);
    expect(await setOperator(email, false)).toBe('changed');
    expect(await listOperators()).not.toContain(email);
    expect(await setOperator('nobody@people.example', true)).toBe('unknown');
    const lines = await db
      .select({ action: operatorEvents.action, actorId: operatorEvents.actorId })
      .from(operatorEvents)
      .where(eq(operatorEvents.subject, `user:${chemist.userId}`));
    expect(lines).toEqual([
      { action: 'add operator', actorId: null },
      { action: 'remove operator', actorId: null },
    ]);
    await expect(db.delete(operatorEvents)).rejects.toThrow();
    await expect(db.update(operatorEvents).set({ action: 'other' })).rejects.toThrow();
  });
});

/** The value of one series in the text for collectors; 0 where it is not there. */
function valueOf(text: string, name: string, labels: Record<string, string> = {}): number {
  const wanted = Object.entries(labels).map(([key, value]) => `${key}="${value}"`);
  const lines = text
    .split('\n')
    .filter((line) => line.startsWith(`${name}{`) || line.startsWith(`${name} `))
    .filter((line) => wanted.every((label) => line.includes(label)));
  return lines.reduce((sum, line) => sum + Number(line.slice(line.lastIndexOf(' '))), 0);
}

describe('metrics', () => {
  it('follow the queue and what workers do', { timeout: 120_000 }, async () => {
    const { modeler } = await newTeam();
    const batchId = await submitPasted(modeler, 'CCCCO\nCB(C)C', short);
    await db
      .update(tasks)
      .set({ queuedAt: sql`now() - interval '90 seconds'` })
      .where(eq(tasks.batchId, batchId));
    const before = await readMetrics();
    expect(valueOf(before, 'windlass_queue_tasks', { kind: 'conformers' })).toBe(2);
    expect(valueOf(before, 'windlass_oldest_waiting_seconds')).toBeGreaterThanOrEqual(90);
    expect(valueOf(before, 'windlass_database_up')).toBe(1);
    expect(valueOf(before, 'windlass_database_connections')).toBeGreaterThan(0);

    const { lead } = await newTeam();
    const { id } = await webhooks.create(lead, { name: 'Ours', url: receiver.url });
    receiver.answerWith(status(500));
    const { name } = await newWorker();
    const labels = { worker: name, kind: 'conformers' };
    const after = await until('the worker to tell of both tasks', async () => {
      const text = await readMetrics();
      return valueOf(text, 'windlass_tasks_finished_total', labels) === 2 && text;
    });
    expect(valueOf(after, 'windlass_tasks_finished_total', { ...labels, state: 'done' })).toBe(1);
    expect(valueOf(after, 'windlass_tasks_finished_total', { ...labels, state: 'failed' })).toBe(1);
    expect(valueOf(after, 'windlass_task_seconds_count', labels)).toBe(2);
    expect(valueOf(after, 'windlass_engine_seconds_total', labels)).toBeGreaterThan(0);
    expect(valueOf(after, 'process_resident_memory_bytes', { worker: name })).toBeGreaterThan(1e6);
    expect(valueOf(after, 'windlass_queue_tasks')).toBe(0);
    expect(valueOf(after, 'windlass_oldest_waiting_seconds')).toBe(0);

    const attempts = (result: string) =>
      until(`an attempt to be ${result}`, async () => {
        const text = await readMetrics();
        return valueOf(text, 'windlass_webhook_attempts_total', { worker: name, result }) === 1;
      });
    const told = await submitPasted(lead, 'CCO', short);
    await attempts('failed');
    const [delivery] = await db
      .select()
      .from(webhookDeliveries)
      .where(eq(webhookDeliveries.webhookId, id));
    expect(JSON.parse(delivery.body)).toMatchObject({
      event: 'batch.finished',
      batch: { id: told },
    });
    expect(delivery).toMatchObject({ state: 'waiting', attempts: 1, status: 500 });
    receiver.answerWith(status(200));
    // The second attempt waits in the queue; its time is brought forward.
    await db.execute(sql`update pgboss.job set start_after = now() where state = 'created'`);
    await attempts('delivered');
    // Each family is told once, as collectors need it.
    const helps = after.split('\n').filter((line) => line.startsWith('# HELP'));
    expect(new Set(helps).size).toBe(helps.length);
  });
});

describe('readiness', () => {
  it('is there with all migrations only', async () => {
    expect(await readDatabaseState()).toBe('ready');
    const table = sql.raw('drizzle.__drizzle_migrations');
    const [last] = await db.execute<{ id: number; created_at: string; hash: string }>(
      sql`select id, created_at, hash from ${table} order by created_at desc limit 1`,
    );
    await db.execute(sql`delete from ${table} where id = ${last.id}`);
    expect(await readDatabaseState()).toBe('not migrated');
    await db.execute(
      sql`insert into ${table} (id, hash, created_at) values (${last.id}, ${last.hash}, ${last.created_at})`,
    );
    expect(await readDatabaseState()).toBe('ready');
  });
});
