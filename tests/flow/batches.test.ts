/** Drafts, submission, roles and the line of waiting tasks against a real database. */
import { eq, sql } from 'drizzle-orm';
import { afterAll, describe, expect, it } from 'vitest';
import { planSchema, readingSchema, type Format } from '$lib/domain/submission';
import * as batches from '$lib/server/batches';
import { db } from '$lib/server/db';
import { entries, molecules, tasks } from '$lib/server/db/schema';
import { discardDraft, readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { UploadError } from '$lib/server/rows';
import { SubmissionError } from '$lib/server/refusals';
import { submit } from '$lib/server/submission';
import * as queue from '$lib/server/tasks';
import { newTeam } from '../support/people';

afterAll(stopQueue);

const scansOnly = planSchema.parse({ scans: { bonds: 'rotatable' } });
const conformersOnly = planSchema.parse({ conformers: {} });

async function* bytesOf(text: string) {
  yield new TextEncoder().encode(text);
}

function draft(member: Member, text: string, format: Format = 'smi', reading = {}) {
  const options = {
    name: 'A batch',
    source: 'paste' as const,
    format,
    reading: readingSchema.parse(reading),
  };
  return readUpload(member, options, bytesOf(text), () => undefined);
}

const jobCount = async (batchId: string) => {
  const [row] = await db.execute<{ count: number }>(
    sql`select count(*)::int as count from pgboss.job where (data->>'taskId')::uuid in (select id from tasks where batch_id = ${batchId})`,
  );
  return row.count;
};

describe('reading an upload', () => {
  it('keeps good rows whatever the bad ones are like, and says what is wrong with those', async () => {
    const { chemist } = await newTeam();
    const id = await draft(chemist, 'CCCC butane\nC1CC ring left open\n[Na+].[Cl-] salt\nC=CC=C');
    const { rows, counts } = await batches.listRows(chemist, id, 1, 10);
    expect(counts).toEqual({ ready: 2, warning: 0, error: 2 });
    expect(rows.map(({ name, verdict }) => [name, verdict])).toEqual([
      ['butane', 'ready'],
      ['ring left open', 'error'],
      ['salt', 'error'],
      ['C4H6', 'ready'],
    ]);
    expect(rows[2].remarks).toMatchObject([{ code: 'mixture' }]);
    expect(rows.map(({ line }) => line)).toEqual([1, 2, 3, 4]);
  });

  it('stores a molecule once, however it is spelled', async () => {
    const { chemist } = await newTeam();
    const id = await draft(chemist, 'CCO\nOCC\nC(O)C');
    expect(
      new Set((await batches.listRows(chemist, id, 1, 10)).rows.map((row) => row.moleculeId)).size,
    ).toBe(1);
    expect(await db.$count(molecules, eq(molecules.teamId, chemist.teamId))).toBe(1);
  });

  it('merges duplicates, strips salts and expands stereocenters on request', async () => {
    const { chemist } = await newTeam();
    const merged = await draft(chemist, 'CCO\nOCC', 'smi', { mergeDuplicates: true });
    expect((await batches.listRows(chemist, merged, 1, 10)).rows).toHaveLength(1);
    const stripped = await draft(chemist, '[Na+].CC(=O)[O-]', 'smi', { stripSalts: true });
    expect((await batches.listRows(chemist, stripped, 1, 10)).rows[0].formula).toBe('C2H3O2−');
    const expanded = await draft(chemist, 'CC(F)Cl halide', 'smi', { expandStereo: 4 });
    expect((await batches.listRows(chemist, expanded, 1, 10)).rows.map(({ name }) => name)).toEqual(
      ['halide (1 of 2)', 'halide (2 of 2)'],
    );
  });

  it('leaves nothing behind of a file that cannot be taken', async () => {
    const { chemist } = await newTeam();
    await expect(draft(chemist, 'name,mass\na,1\n', 'csv')).rejects.toThrow(UploadError);
    const [{ count }] = await db.execute<{ count: number }>(
      sql`select count(*)::int as count from batches where team_id = ${chemist.teamId}`,
    );
    expect(count).toBe(0);
  });

  it('shows a draft to its maker only', async () => {
    const team = await newTeam();
    const id = await draft(team.chemist, 'CCO');
    await expect(batches.get(team.lead, id)).rejects.toMatchObject({ status: 404 });
    await expect(discardDraft(team.lead, id)).rejects.toMatchObject({ status: 404 });
    await discardDraft(team.chemist, id);
    await expect(batches.get(team.chemist, id)).rejects.toMatchObject({ status: 404 });
  });
});

describe('submitting', () => {
  it('writes tasks and their jobs together', async () => {
    const { chemist } = await newTeam();
    const id = await draft(chemist, 'CCCC butane\nCCCCC pentane\nnonsense');
    expect(await submit(chemist, id, scansOnly)).toEqual({ queued: 3, reused: 0 });
    expect(await jobCount(id)).toBe(3);
    const { counts, share } = await batches.progress(chemist, id);
    expect(counts).toEqual({ queued: 3, running: 0, done: 0, failed: 0, cancelled: 0 });
    expect(share).toBe(0);
  });

  it('leaves neither task nor job behind when it fails half-way', async () => {
    const { chemist } = await newTeam();
    // Methane has no bond to scan: nothing can be computed, and the whole submission is taken back.
    const id = await draft(chemist, 'C');
    await expect(submit(chemist, id, scansOnly)).rejects.toThrow(SubmissionError);
    expect(await jobCount(id)).toBe(0);
    expect((await batches.get(chemist, id)).submittedAt).toBeNull();
  });

  it('cannot be done twice', async () => {
    const { chemist } = await newTeam();
    const id = await draft(chemist, 'CCCC');
    await submit(chemist, id, scansOnly);
    await expect(submit(chemist, id, scansOnly)).rejects.toMatchObject({ status: 404 });
  });

  it('lets members take turns, so that one molecule does not wait behind thousands', async () => {
    const { modeler, chemist } = await newTeam();
    const many = Array.from({ length: 120 }, (_, n) => `${'C'.repeat(4 + (n % 12))} m${n}`).join(
      '\n',
    );
    await submit(modeler, await draft(modeler, many), conformersOnly);
    const single = await draft(chemist, 'C=CC=C');
    await submit(chemist, single, conformersOnly);
    const order = await db.execute<{ batch_id: string }>(
      sql`select t.batch_id from pgboss.job j join tasks t on t.id = (j.data->>'taskId')::uuid
          join batches b on b.id = t.batch_id where b.team_id = ${modeler.teamId} and j.state = 'created'
          order by j.priority desc, j.created_on`,
    );
    expect(order.findIndex(({ batch_id }) => batch_id === single)).toBeLessThanOrEqual(1);
  });
});

describe('roles', () => {
  it('a reader submits nothing, a chemist no bulk batch', async () => {
    const { reader, chemist, modeler } = await newTeam();
    await expect(draft(reader, 'CCO')).rejects.toMatchObject({ status: 403 });
    const bulk = Array.from({ length: 51 }, (_, n) => `CCCC m${n}`).join('\n');
    await expect(submit(chemist, await draft(chemist, bulk), conformersOnly)).rejects.toThrow(
      'at most 50 molecules',
    );
    await expect(
      submit(modeler, await draft(modeler, bulk), conformersOnly),
    ).resolves.toMatchObject({ reused: 0 });
  });

  it('a chemist cancels and reruns nothing, a modeler does', async () => {
    const { chemist, modeler } = await newTeam();
    const id = await draft(chemist, 'CCCCC');
    await submit(chemist, id, scansOnly);
    await expect(queue.cancel(chemist, { batchId: id })).rejects.toMatchObject({ status: 403 });
    expect(await queue.cancel(modeler, { batchId: id })).toBe(2);
    expect(await jobCount(id)).toBe(0);
    expect((await batches.progress(modeler, id)).counts.cancelled).toBe(2);
    await expect(queue.rerun(chemist, { batchId: id })).rejects.toMatchObject({ status: 403 });
    expect(await queue.rerun(modeler, { batchId: id })).toBe(2);
    expect(await jobCount(id)).toBe(2);
    expect((await batches.progress(modeler, id)).counts.queued).toBe(2);
  });
});

describe('another team', () => {
  it('sees, cancels and reruns nothing', async () => {
    const { modeler } = await newTeam();
    const stranger = (await newTeam()).lead;
    const id = await draft(modeler, 'CCCC butane');
    await submit(modeler, id, scansOnly);
    const [entry] = await db.select().from(entries).where(eq(entries.batchId, id));
    const query = {
      state: null,
      sort: 'position',
      descending: false,
      page: 1,
      pageSize: 10,
    } as const;
    await expect(batches.get(stranger, id)).rejects.toMatchObject({ status: 404 });
    await expect(batches.listEntries(stranger, id, query)).rejects.toMatchObject({ status: 404 });
    await expect(queue.cancel(stranger, { batchId: id })).rejects.toMatchObject({ status: 404 });
    await expect(queue.rerun(stranger, { batchId: id, rows: [entry.id] })).rejects.toMatchObject({
      status: 404,
    });
    expect(await db.$count(tasks, eq(tasks.batchId, id))).toBe(1);
  });
});
