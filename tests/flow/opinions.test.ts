/** Second opinions from the request to the stored curves: with the real program where it is installed, and with broken ones. */
import type { ChildProcess } from 'node:child_process';
import { chmodSync, existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { heatSettingsSchema } from '$lib/domain/second-opinions';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { readMolecule } from '$lib/engine';
import { readAnswers } from '$lib/server/answers';
import { filesOf } from '$lib/server/bundle-files';
import { db } from '$lib/server/db';
import { entries, tasks } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import * as heats from '$lib/server/heats';
import * as opinions from '$lib/server/opinions';
import * as rankings from '$lib/server/rankings';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { cancel } from '$lib/server/tasks';
import { versions } from '$lib/server/worker-programs';
import { bytesOf, performAll } from '../support/batches';
import { newTeam } from '../support/people';
import { hasMopac, hasXtb } from '../support/programs';
import { until } from '../support/until';
import { killWorker, startWorker } from '../support/worker';

let folder: string;
let worker: ChildProcess | null = null;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'opinions-test-'));
});
afterEach(async () => {
  if (worker) await killWorker(worker);
  worker = null;
});
afterAll(async () => {
  await stopQueue();
  rmSync(folder, { recursive: true });
});

/** A program in xtb's place that tells a version and then does something else. */
function brokenXtb(script: string): string {
  const path = join(folder, `xtb-${Math.random().toString(36).slice(2)}`);
  writeFileSync(
    path,
    `#!/bin/sh\n[ "$1" = --version ] && { echo 'xtb version 6.5.1'; exit 0; }\n${script}\n`,
  );
  chmodSync(path, 0o755);
  return path;
}

/** A team with a finished scan of butadiene. */
async function scanned(settings: Record<string, unknown> = {}) {
  const team = await newTeam();
  const options = {
    name: 'Butadiene',
    source: 'paste' as const,
    format: 'smi' as const,
    reading: readingSchema.parse({}),
  };
  const id = await readUpload(team.modeler, options, bytesOf('C=CC=C butadiene'), () => undefined);
  await submit(
    team.modeler,
    id,
    planSchema.parse({ scans: { bonds: 'conjugated', step: 30, ...settings } }),
  );
  await performAll(id);
  const [{ moleculeId }] = await db.select().from(entries).where(eq(entries.batchId, id));
  const [{ resultId }] = await db.select().from(tasks).where(eq(tasks.batchId, id));
  return { team, batchId: id, moleculeId: moleculeId!, result: resultId! };
}
type Scanned = Awaited<ReturnType<typeof scanned>>;

const ask = (member: Member, { moleculeId, result }: Scanned, depth: 'quick' | 'relaxed') =>
  opinions.request(member, moleculeId, { result, depth });
const rowOf = async (taskId: string) => {
  const [task] = await db.select().from(tasks).where(eq(tasks.id, taskId));
  return task;
};
const ended = (taskId: string) =>
  until('the task to end', async () => {
    const task = await rowOf(taskId);
    return !['queued', 'running'].includes(task.state) && task;
  });
async function workerWith(xtb: string): Promise<void> {
  worker = startWorker({ WINDLASS_XTB: xtb });
  await until('the worker to tell what it has', async () => (await versions()).xtb !== null);
}

describe('a request for a second opinion', () => {
  it('is refused with the way to add the program while no worker has it', async () => {
    const scan = await scanned();
    await expect(ask(scan.team.chemist, scan, 'quick')).rejects.toThrow(/apt-get install xtb/);
  });

  it('is refused for other teams, readers, rigid scans and other results', async () => {
    const scan = await scanned();
    const stranger = (await newTeam()).lead;
    await expect(ask(stranger, scan, 'quick')).rejects.toMatchObject({ status: 404 });
    await expect(ask(scan.team.reader, scan, 'quick')).rejects.toMatchObject({ status: 403 });
    const rigid = await scanned({ relaxed: false });
    await expect(ask(rigid.team.chemist, rigid, 'quick')).rejects.toThrow(/relaxed torsion scan/);
  });
});

describe.skipIf(!hasXtb)('with the program', () => {
  it(
    'is computed, stored beside its scan, and not computed again',
    { timeout: 120_000 },
    async () => {
      const scan = await scanned();
      await workerWith('/usr/bin/xtb');
      const { chemist, modeler } = scan.team;
      // Two at once ask for the same; one task does it.
      const [first, second] = await Promise.all([
        ask(chemist, scan, 'relaxed'),
        ask(modeler, scan, 'relaxed'),
      ]);
      expect(second.taskId).toBe(first.taskId);
      const quick = await ask(chemist, scan, 'quick');
      const [relaxedTask, quickTask] = [await ended(first.taskId), await ended(quick.taskId)];
      expect(relaxedTask).toMatchObject({ state: 'done', error: null });
      expect(quickTask).toMatchObject({ state: 'done', error: null });

      const [opinion] = await readAnswers([relaxedTask.resultId!], 10);
      expect(opinion.profiles.map(({ model }) => model)).toEqual([
        'MMFF94s',
        'GFN2-xTB',
        'GFN1-xTB',
      ]);
      expect(opinion.details).toMatchObject({
        depth: 'relaxed',
        gaps: [],
        program: expect.stringMatching(/^xtb \d/),
      });
      const [, gfn2, gfn1] = opinion.profiles;
      expect(gfn2.points).toHaveLength(12);
      for (const { angle, reached } of gfn2.points) {
        expect(Math.abs(((reached - angle + 540) % 360) - 180)).toBeLessThan(0.1);
      }
      expect(gfn1.points[3].coordinates).toEqual(gfn2.points[3].coordinates);
      // s-trans is the lowest form of butadiene, and the planar s-cis arrangement a few kcal/mol above it (common practice).
      const at = (angle: number) => gfn2.points.find((point) => point.angle === angle)!.relative;
      expect(at(180)).toBeLessThan(0.01);
      expect(at(0)).toBeGreaterThan(2);

      const bundled = {
        name: 'butadiene',
        folder: 'butadiene',
        smiles: 'C=CC=C',
        molecule: readMolecule({ smiles: 'C=CC=C' }),
      };
      const files = filesOf({ ...bundled, answers: [opinion] });
      const table = files.find(({ path }) => path.endsWith('relaxed.csv'))!.content.split('\n');
      expect(table[0].trim()).toBe(
        'angle_degrees,MMFF94s_kcal_per_mol,GFN2-xTB_kcal_per_mol,GFN1-xTB_kcal_per_mol,consensus_kcal_per_mol,lowest_kcal_per_mol,highest_kcal_per_mol',
      );
      const last = table[12].split(',').map(Number);
      expect(last[4]).toBeCloseTo((last[1] + last[2] + last[3]) / 3, 3);
      expect(files.filter(({ path }) => path.endsWith('.sdf'))).toHaveLength(2);

      const [scanAgain] = await readAnswers([scan.result], 10);
      expect(scanAgain.profiles.map(({ model }) => model)).toEqual(['MMFF94s']);
      expect(await ask(chemist, scan, 'relaxed')).toEqual({ taskId: first.taskId, state: 'done' });
    },
  );
});

describe.skipIf(!hasXtb)('conformers by the program', () => {
  it('are ranked again and stored beside their search', { timeout: 120_000 }, async () => {
    const { modeler } = await newTeam();
    const options = {
      name: 'Butane',
      source: 'paste' as const,
      format: 'smi' as const,
      reading: readingSchema.parse({}),
    };
    const id = await readUpload(modeler, options, bytesOf('CCCC butane'), () => undefined);
    await submit(modeler, id, planSchema.parse({ conformers: {} }));
    await performAll(id);
    const [{ moleculeId }] = await db.select().from(entries).where(eq(entries.batchId, id));
    const [{ resultId }] = await db.select().from(tasks).where(eq(tasks.batchId, id));
    await workerWith('/usr/bin/xtb');
    const asked = await rankings.request(modeler, moleculeId!, {
      result: resultId!,
      depth: 'optimized',
      window: 6,
    });
    const task = await ended(asked.taskId);
    expect(task).toMatchObject({ state: 'done', error: null });
    const [answer] = await readAnswers([task.resultId!], 14);
    expect(answer).toMatchObject({ model: 'GFN2-xTB', details: { from: [[0], [1]], gaps: [] } });
    expect(answer.conformers.map(({ degeneracy }) => degeneracy)).toEqual([1, 2]);
    // Anti butane is below gauche by 0.5 to 1 kcal/mol (common practice).
    expect(answer.conformers[1].relative).toBeGreaterThan(0.3);
    expect(answer.conformers[1].relative).toBeLessThan(1.2);
  });
});

describe.skipIf(!hasMopac)('a heat of formation', () => {
  it('is that of the lowest conformers by PM7, and is stored', { timeout: 120_000 }, async () => {
    const scan = await scanned();
    worker = startWorker();
    await until('the worker to tell what it has', async () => (await versions()).mopac !== null);
    const settings = heatSettingsSchema.parse({});
    const asked = await heats.request(scan.team.chemist, scan.moleculeId, settings);
    const task = await ended(asked.taskId);
    expect(task).toMatchObject({ state: 'done', error: null });
    const [answer] = await readAnswers([task.resultId!], 10);
    expect(answer).toMatchObject({ model: 'PM7', details: { gaps: [] } });
    // Buta-1,3-diene: 26.3 kcal/mol by experiment (from memory); PM7 is within a few of it.
    expect(Math.abs((answer.details.heatOfFormation as number) - 26.3)).toBeLessThan(4);
    const stranger = (await newTeam()).lead;
    await expect(heats.request(stranger, scan.moleculeId, settings)).rejects.toMatchObject({
      status: 404,
    });
  });
});

describe('with a program that misbehaves', () => {
  it(
    'a hanging one is ended with its whole group when the task is cancelled',
    { timeout: 120_000 },
    async () => {
      const scan = await scanned();
      const mark = join(folder, 'hanging');
      await workerWith(brokenXtb(`sleep 600 & echo $! > ${mark}; wait`));
      const { taskId } = await ask(scan.team.chemist, scan, 'quick');
      const pid = await until(
        'the program to hang',
        async () => existsSync(mark) && readFileSync(mark, 'utf8').trim(),
      );
      expect(await cancel(scan.team.modeler, { batchId: scan.batchId, tasks: [taskId] })).toBe(1);
      await until('the program to end', async () => !existsSync(`/proc/${pid}`));
      expect((await rowOf(taskId)).state).toBe('cancelled');
      // Asked for again, the same task is tried again.
      expect(await ask(scan.team.chemist, scan, 'quick')).toMatchObject({
        taskId,
        state: 'queued',
      });
    },
  );

  it('ends with a worker that is killed', { timeout: 120_000 }, async () => {
    const scan = await scanned();
    const mark = join(folder, 'orphan');
    await workerWith(brokenXtb(`echo $$ > ${mark}; exec sleep 600`));
    await ask(scan.team.chemist, scan, 'quick');
    const pid = await until(
      'the program to hang',
      async () => existsSync(mark) && readFileSync(mark, 'utf8').trim(),
    );
    await killWorker(worker!);
    await until('the program to end', async () => !existsSync(`/proc/${pid}`));
    expect(existsSync(`/proc/${pid}`)).toBe(false);
  });

  it(
    'a failing one fails the task with its reason, and stores nothing',
    { timeout: 120_000 },
    async () => {
      const scan = await scanned();
      await workerWith(brokenXtb('echo "-1- xtb_setup: cannot do it" >&2; exit 1'));
      const { taskId } = await ask(scan.team.chemist, scan, 'quick');
      const task = await ended(taskId);
      expect(task).toMatchObject({ state: 'failed', resultId: null });
      expect((task.error as { message: string }).message).toMatch(/cannot do it/);
    },
  );
});
