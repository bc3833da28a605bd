/** Comparing stored profiles: what is loaded, in which order, and for whom. */
import { randomUUID } from 'node:crypto';
import { setImmediate } from 'node:timers/promises';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { compareProfiles, readComparison } from '$lib/domain/comparison';
import { comparisonTable } from '$lib/domain/comparison-table';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { perform } from '$lib/engine';
import { listProfiles, loadProfiles } from '$lib/server/comparison';
import * as batches from '$lib/server/batches';
import { db } from '$lib/server/db';
import { tasks } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import * as report from '$lib/server/report';
import * as results from '$lib/server/results';
import { submit } from '$lib/server/submission';
import { claim } from '$lib/server/tasks';
import { newTeam } from '../support/people';

afterAll(stopQueue);

let team: Awaited<ReturnType<typeof newTeam>>;
let stranger: Member;
let molecules: string[];
let profiles: string[];

async function* bytesOf(text: string) {
  yield new TextEncoder().encode(text);
}

beforeAll(async () => {
  team = await newTeam();
  stranger = (await newTeam()).lead;
  const reading = readingSchema.parse({});
  const options = { name: 'Compared', source: 'paste', format: 'smi', reading } as const;
  const rows = 'CCCC butane\nC=CC=C butadiene';
  const batchId = await readUpload(team.chemist, options, bytesOf(rows), () => undefined);
  const plan = planSchema.parse({ scans: { bonds: 'rotatable', step: 30 } });
  await submit(team.chemist, batchId, plan);
  for (const { id } of await db.select().from(tasks).where(eq(tasks.batchId, batchId))) {
    const task = (await claim(id, 'a test'))!;
    const result = await perform(results.requestOf(task), {
      now: () => performance.now(),
      breathe: () => setImmediate(),
    });
    await results.store(task, result);
  }
  const listed = await batches.listRows(team.reader, batchId, 1, 5);
  molecules = listed.rows.map(({ moleculeId }) => moleculeId!);
  const choices = await listProfiles(team.reader, molecules);
  profiles = choices.map((choice) => choice.profiles[0].id);
}, 180_000);

describe('a comparison', () => {
  it('offers the profiles of molecules by their bonds', async () => {
    expect(await listProfiles(team.reader, molecules)).toMatchObject([
      { name: 'butane', profiles: [{ bond: 'C2–C3', model: 'MMFF94s', relaxed: true }] },
      { name: 'butadiene', profiles: [{ bond: 'C2–C3' }] },
    ]);
    expect(await listProfiles(stranger, molecules)).toEqual([]);
  });

  it('reads barriers and populations off, and their differences', async () => {
    const view = readComparison(
      new URLSearchParams([...profiles.map((id) => ['p', id]), ['angle', '180']]),
    );
    const loaded = await loadProfiles(team.reader, profiles);
    expect(loaded.map(({ bondKind }) => bondKind)).toEqual(['C–C', 'C–C, conjugated']);
    const [butane, butadiene] = compareProfiles(loaded, view);
    expect(butane.preferred!.label).toContain('anti');
    expect(butadiene.preferred!.label).toContain('s-trans');
    // Both are lowest at 180°; MMFF94s turns butadiene over 6.2 kcal/mol from s-trans (see tests/pages/batch.spec.ts).
    expect(butane.energy).toBeCloseTo(0, 2);
    expect(butadiene.energy).toBeCloseTo(0, 2);
    expect(butadiene.barrier).toBeCloseTo(6.18, 1);
    expect(butadiene.population!).toBeGreaterThan(butane.population!);
    const table = comparisonTable([butane, butadiene], view).split('\r\n');
    expect(table).toHaveLength(4);
    expect(table[1]).toMatch(/^butane,C2–C3,C–C,C1 and C4,false,0,MMFF94s,true,/);
    const kilojoules = comparisonTable([butadiene], { ...view, unit: 'kJ/mol' });
    expect(kilojoules).toContain(`,${(butadiene.barrier! * 4.184).toFixed(4).replace(/0+$/, '')},`);
  });

  it('keeps the order asked for and leaves out what is not there', async () => {
    const asked = [profiles[1], randomUUID(), profiles[0]];
    expect((await loadProfiles(team.reader, asked)).map(({ id }) => id)).toEqual([
      profiles[1],
      profiles[0],
    ]);
  });

  it('is closed to other teams', async () => {
    await expect(loadProfiles(stranger, profiles)).rejects.toMatchObject({ status: 404 });
    await expect(loadProfiles(team.reader, [randomUUID()])).rejects.toMatchObject({ status: 404 });
  });
});

describe('a report', () => {
  it('has plots, settings, methods with literature, and cautions', async () => {
    const found = await report.load(team.reader, molecules[1], 'kJ/mol');
    expect(found.molecule.scans[0].plot).toContain('Relative energy / kJ/mol');
    expect(found.origins).toMatchObject([
      { kind: 'scan', model: 'MMFF94s', settings: { step: 30, relaxed: true } },
    ]);
    expect(found.methods).toMatch(/<h2>Methods<\/h2>[\s\S]*Halgren[\s\S]*<h3>Cautions<\/h3>/);
  });

  it('is closed to other teams', async () => {
    await expect(report.load(stranger, molecules[1], 'kcal/mol')).rejects.toMatchObject({
      status: 404,
    });
  });
});
