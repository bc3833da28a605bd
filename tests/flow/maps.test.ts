/** A map of two bonds from the choice on the drawing to the bundle. */
import { eq } from 'drizzle-orm';
import { unzipSync } from 'fflate';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { answerSchema } from '$lib/domain/bundle-schema';
import { planSchema, readingSchema, type Plan } from '$lib/domain/submission';
import { readMolecule } from '$lib/engine';
import { readAnswers, resultIdsOf } from '$lib/server/answers';
import { bundleBatch } from '$lib/server/bundles';
import { conformersFile } from '$lib/server/conformers-file';
import { db } from '$lib/server/db';
import { entries } from '$lib/server/db/schema';
import { chooseBonds, readUpload } from '$lib/server/drafts';
import { estimate } from '$lib/server/estimates';
import { geometries, load } from '$lib/server/molecule-page';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { bytesOf, performAll } from '../support/batches';
import { newTeam } from '../support/people';

afterAll(stopQueue);

const STEP = 60;
const PENTANE_ATOMS = 17;
let team: Awaited<ReturnType<typeof newTeam>>;
let batchId: string;
let moleculeId: string;
let plan: Plan;
let price: Awaited<ReturnType<typeof estimate>>;

beforeAll(async () => {
  team = await newTeam();
  const reading = readingSchema.parse({});
  const options = { name: 'Mapped', source: 'paste', format: 'smi', reading } as const;
  const rows = bytesOf('CCCCC pentane\nCCCC butane, not mapped');
  batchId = await readUpload(team.chemist, options, rows, () => undefined);
  const [pentane] = await db
    .select()
    .from(entries)
    .where(eq(entries.batchId, batchId))
    .orderBy(entries.position);
  moleculeId = pentane.moleculeId!;
  plan = planSchema.parse({ maps: { step: STEP }, conformers: { effort: 'quick' } });
  const bonds: [number, number][] = [
    [1, 2],
    [3, 2],
  ];
  await chooseBonds(team.chemist, batchId, pentane.id, { purpose: 'map', bonds });
  price = await estimate(team.chemist, batchId, plan);
  await submit(team.chemist, batchId, plan);
  await performAll(batchId);
}, 180_000);

describe('a map of two bonds', () => {
  it('is planned and priced for the rows in which two bonds were chosen', () => {
    expect(price.tasks).toBe(3);
    expect(price.seconds).toBeGreaterThan(0);
  });

  it('is stored with every cell, its energies and its geometries', async () => {
    const answers = await readAnswers(await resultIdsOf(team.reader, moleculeId), PENTANE_ATOMS);
    const { map } = answers.find(({ kind }) => kind === 'map')!;
    expect(map!.cells).toHaveLength((360 / STEP) ** 2);
    expect(map!.cells[0].angles).toEqual([-120, -120]);
    for (const { coordinates } of map!.cells) expect(coordinates).toHaveLength(3 * PENTANE_ATOMS);
    // MMFF94s: anti, anti is the lowest form of pentane, and anti, gauche lies 0.8 kcal/mol above (as in RDKit 2022.09.3).
    const [lowest, second] = map!.minima;
    expect(lowest.angles.map(Math.abs).map(Math.round)).toEqual([180, 180]);
    expect(second.relative).toBeCloseTo(0.8, 1);
  });

  it('is shown with its minima by name, and geometries in the order of cells and minima', async () => {
    const { maps } = await load(team.reader, moleculeId);
    expect(maps).toHaveLength(1);
    const [{ torsions, minima, energies, id }] = maps;
    expect(torsions.map(({ bond }) => bond).sort()).toEqual(['C3–C2', 'C3–C4']);
    expect(minima[0].labels).toEqual(['anti', 'anti']);
    const molfiles = await geometries(team.reader, moleculeId, id);
    expect(molfiles).toHaveLength(energies.length + minima.length);
    expect(readMolecule({ molfile: molfiles[energies.length] }).smiles).toBe('CCCCC');
  });

  it('goes into the bundle as grid, minima, picture and JSON after the schema', async () => {
    const { archive } = await bundleBatch(team.reader, batchId);
    const chunks: Buffer[] = [];
    for await (const chunk of archive) chunks.push(chunk as Buffer);
    const files = unzipSync(Buffer.concat(chunks));
    const paths = Object.keys(files).filter((path) => path.startsWith('pentane/map_'));
    expect(paths.map((path) => path.split('.').at(-1)).sort()).toEqual([
      'csv',
      'json',
      'sdf',
      'svg',
    ]);
    const text = (ending: string): string =>
      new TextDecoder().decode(files[paths.find((path) => path.endsWith(ending))!]);
    expect(text('csv').trim().split('\r\n')).toHaveLength(1 + (360 / STEP) ** 2);
    const answer = answerSchema.parse(JSON.parse(text('json')));
    expect(text('sdf').split('$$$$').length - 1).toBe(answer.map!.minima.length);
    expect(text('svg')).toContain('/ degrees');
    expect(new TextDecoder().decode(files['methods.md'])).toContain('Maps of two bonds');
  });

  it('is not seen by another team', async () => {
    const stranger = (await newTeam()).lead;
    await expect(load(stranger, moleculeId)).rejects.toMatchObject({ status: 404 });
  });
});

describe('chosen conformers', () => {
  it('are a file of their own, with energies, for the molecule’s own team', async () => {
    const { conformers } = await load(team.reader, moleculeId);
    const [{ id, rows }] = conformers;
    expect(rows.length).toBeGreaterThan(2);
    const { fileName, content } = await conformersFile(team.reader, moleculeId, id, [0, 2]);
    expect(fileName).toBe('pentane_conformers.sdf');
    expect(content.match(/pentane conformer \d+/g)).toEqual([
      'pentane conformer 1',
      'pentane conformer 3',
    ]);
    expect(content).toContain('<RELATIVE_KCAL_PER_MOL>\n0.0000');
    const missing = conformersFile(team.reader, moleculeId, id, [900]);
    await expect(missing).rejects.toMatchObject({ status: 404 });
    const stranger = (await newTeam()).lead;
    const foreign = conformersFile(stranger, moleculeId, id, [0]);
    await expect(foreign).rejects.toMatchObject({ status: 404 });
  });

  it('name the turn of every bond', async () => {
    const [{ rows, torsions }] = (await load(team.reader, moleculeId)).conformers;
    expect(torsions).toHaveLength(2);
    expect(rows[0].torsions.map(({ label }) => label)).toEqual(['anti', 'anti']);
    expect(rows[1].torsions.map(({ label }) => label).sort()).toEqual(['anti', 'gauche']);
  });
});
