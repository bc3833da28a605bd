/** The conjugated bonds of a batch: sorted and paged by the database, and as a table. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { readUpload } from '$lib/server/drafts';
import { stopQueue } from '$lib/server/queue';
import * as series from '$lib/server/series';
import { submit } from '$lib/server/submission';
import { bytesOf, performAll } from '../support/batches';
import { newTeam } from '../support/people';

afterAll(stopQueue);

let team: Awaited<ReturnType<typeof newTeam>>;
let batchId: string;
const all = { sort: 'position', descending: false, page: 1, pageSize: 50 } as const;

beforeAll(async () => {
  team = await newTeam();
  const reading = readingSchema.parse({});
  const options = { name: 'A series', source: 'paste', format: 'smi', reading } as const;
  // Styrene has no s-cis form; ethane has no conjugated bond at all.
  const rows = bytesOf('C=CC=C =butadiene\nC=Cc1ccccc1 styrene\nCC ethane\nC=CC(=C)C isoprene');
  batchId = await readUpload(team.chemist, options, rows, () => undefined);
  await submit(team.chemist, batchId, planSchema.parse({ conjugation: {} }));
  await performAll(batchId);
}, 180_000);

const namesBy = async (query: Partial<series.SeriesQuery>) =>
  (await series.list(team.reader, batchId, { ...all, ...query })).rows.map(({ name }) => name);

describe('a series', () => {
  it('has a row for each conjugated bond, with its figures and its profile', async () => {
    const { rows, total } = await series.list(team.reader, batchId, all);
    expect(total).toBe(3);
    expect(rows.map(({ position }) => position)).toEqual([1, 2, 4]);
    expect(rows[0]).toMatchObject({ bond: 'C2–C3', kind: 'diene' });
    // MMFF94s: gauche butadiene 2.47, barrier 6.18 kcal/mol.
    expect(rows[0].difference).toBeCloseTo(2.47, 1);
    expect(rows[0].barrier).toBeCloseTo(6.18, 1);
    expect(rows[0].profile!.length).toBeGreaterThan(20);
    expect(rows[1].difference).toBeNull();
  });

  it('is sorted either way, with missing figures last', async () => {
    const ascending = await namesBy({ sort: 'difference' });
    const descending = await namesBy({ sort: 'difference', descending: true });
    expect(ascending.at(-1)).toBe('styrene');
    expect(descending.at(-1)).toBe('styrene');
    expect(descending.slice(0, 2)).toEqual(ascending.slice(0, 2).reverse());
    expect(await namesBy({ sort: 'name', descending: true })).toEqual([
      'styrene',
      'isoprene',
      '=butadiene',
    ]);
  });

  it('is paged', async () => {
    expect(await namesBy({ page: 2, pageSize: 2 })).toEqual(['isoprene']);
  });

  it('is a table for spreadsheets, in the order asked for, that runs no formula', async () => {
    const { lines } = await series.table(team.reader, batchId, { sort: 'twist', descending: true });
    const text: string[] = [];
    for await (const line of lines) text.push(line);
    expect(text).toHaveLength(4);
    expect(text[0]).toBe(
      'row,name,bond,kind,twist_degrees,s_cis_minus_s_trans_kcal_per_mol,s_cis_fraction,planar_s_cis_cost_kcal_per_mol,barrier_kcal_per_mol,mean_overlap,temperature_kelvin\r\n',
    );
    expect(text.join('')).toContain("1,'=butadiene,C2-C3,diene,");
    expect(text[1]).toMatch(/^2,styrene,/);
  });

  it('is closed to other teams', async () => {
    const stranger = (await newTeam()).lead;
    await expect(series.list(stranger, batchId, all)).rejects.toMatchObject({ status: 404 });
    await expect(series.table(stranger, batchId, all)).rejects.toMatchObject({ status: 404 });
  });
});
