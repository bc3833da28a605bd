/** Workers of their own processes: results, reuse, cancelling, and workers that die. */
import type { ChildProcess } from 'node:child_process';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { readAnswers, resultIdsOf } from '$lib/server/answers';
import * as batches from '$lib/server/batches';
import { db } from '$lib/server/db';
import { entries, results, tasks } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { cancel } from '$lib/server/tasks';
import { newTeam } from '../support/people';
import { until } from '../support/until';
import { killWorker, startWorker } from '../support/worker';

/** Starting a worker takes seconds, so the tests share one until one of them kills it. */
let worker: ChildProcess;
beforeAll(() => {
  worker = startWorker();
});
afterAll(async () => {
  await killWorker(worker);
  await stopQueue();
});

async function* bytesOf(text: string) {
  yield new TextEncoder().encode(text);
}

async function submitText(member: Member, text: string, plan: unknown): Promise<string> {
  const options = {
    name: 'A batch',
    source: 'paste' as const,
    format: 'smi' as const,
    reading: readingSchema.parse({}),
  };
  const id = await readUpload(member, options, bytesOf(text), () => undefined);
  await submit(member, id, planSchema.parse(plan));
  return id;
}

const taskOf = async (batchId: string) => {
  const [task] = await db.select().from(tasks).where(eq(tasks.batchId, batchId));
  return task;
};
const ended = (member: Member, batchId: string, seconds = 50) =>
  until(
    'the batch to end',
    async () => {
      const { counts } = await batches.progress(member, batchId);
      return counts.queued + counts.running === 0 && counts;
    },
    seconds,
  );
/** A search that would take minutes, so that there is time to disturb it. */
const long = { conformers: { effort: 'thorough', window: 50, limit: 1000 } };
const longChain = `${'CC(O)'.repeat(7)}C a long chain`;

describe('a worker', () => {
  it('computes, stores and reports what the engine answers', { timeout: 120_000 }, async () => {
    const { chemist } = await newTeam();
    const id = await submitText(chemist, 'CCCC butane', {
      conformers: {},
      scans: { bonds: 'rotatable' },
    });
    expect(await ended(chemist, id, 100)).toMatchObject({ done: 2, failed: 0 });
    const [{ moleculeId }] = await db.select().from(entries).where(eq(entries.batchId, id));
    const answers = await readAnswers(await resultIdsOf(chemist, moleculeId!), 14);
    // MMFF94s: gauche butane 0.78 kcal/mol, barriers 3.96 and 5.21 (RDKit 2022.09.3 gives the same).
    const conformers = answers.find(({ kind }) => kind === 'conformers')!.conformers;
    expect(conformers.map(({ degeneracy }) => degeneracy)).toEqual([1, 2]);
    expect(conformers[1].relative).toBeCloseTo(0.78, 1);
    const [profile] = answers.find(({ kind }) => kind === 'scan')!.profiles;
    expect(profile.points).toHaveLength(24);
    expect(profile.points[0].coordinates).toHaveLength(42);
    const maxima = profile.stationary.filter(({ kind }) => kind === 'maximum');
    expect(Math.max(...maxima.map(({ relative }) => relative))).toBeCloseTo(5.21, 1);
  });

  it('answers at once what the team has already', { timeout: 120_000 }, async () => {
    const { chemist, modeler } = await newTeam();
    const plan = { conformers: {} };
    await ended(chemist, await submitText(chemist, 'CCO', plan), 100);
    const again = await submitText(modeler, 'OCC the same, spelled otherwise', plan);
    // Done in the transaction that submitted it: no worker had a part in it.
    expect(await taskOf(again)).toMatchObject({ state: 'done', reused: true, attempt: 0 });
    expect(await db.$count(results, eq(results.teamId, chemist.teamId))).toBe(1);
  });

  it(
    'says why a molecule cannot be computed, and tries it once',
    { timeout: 120_000 },
    async () => {
      const { chemist } = await newTeam();
      // MMFF94 has no parameters for boron.
      const id = await submitText(chemist, 'CB(C)C trimethylborane', { conformers: {} });
      expect(await ended(chemist, id, 100)).toMatchObject({ failed: 1 });
      const task = await taskOf(id);
      expect(task.attempt).toBe(1);
      expect(task.error).toMatchObject({ code: 'unsupported-environment' });
    },
  );
});

describe('cancelling', () => {
  it('stops a running task and frees its thread', { timeout: 120_000 }, async () => {
    const { modeler } = await newTeam();
    const id = await submitText(modeler, longChain, long);
    await until('the task to run', async () => (await taskOf(id)).progress > 0, 100);
    expect(await cancel(modeler, { batchId: id })).toBe(1);
    // Both threads are free again: two further tasks run at the same time.
    const next = await submitText(modeler, `${longChain} 1\n${longChain}C 2`, long);
    await until('both threads to be free', async () => {
      const { counts } = await batches.progress(modeler, next);
      return counts.running === 2;
    });
    await cancel(modeler, { batchId: next });
    const cancelled = await taskOf(id);
    expect(cancelled).toMatchObject({ state: 'cancelled', resultId: null });
    expect(cancelled.progress).toBeLessThan(1);
  });
});

describe('a worker that is killed in the middle of a task', () => {
  it(
    'loses nothing: another one takes the task and stores its result once',
    { timeout: 180_000 },
    async () => {
      const { chemist } = await newTeam();
      const id = await submitText(chemist, `${'CC(O)'.repeat(3)}C a chain`, {
        conformers: { effort: 'thorough' },
      });
      await until('the task to run', async () => (await taskOf(id)).state === 'running', 60);
      await killWorker(worker);
      worker = startWorker();
      expect(await ended(chemist, id, 170)).toMatchObject({ done: 1 });
      const task = await taskOf(id);
      expect(task.attempt).toBeGreaterThanOrEqual(2);
      const [{ moleculeId }] = await db.select().from(entries).where(eq(entries.batchId, id));
      expect(await db.$count(results, eq(results.moleculeId, moleculeId!))).toBe(1);
      const [{ waited }] = await db.execute<{ waited: number }>(
        sql`select extract(epoch from started_at - created_at)::float8 as waited from tasks where id = ${task.id}`,
      );
      expect(waited).toBeLessThan(90);
    },
  );
});
