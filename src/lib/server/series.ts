/** The conjugated bonds of a whole batch side by side: one row a bond, sorted and paged by the database. */
import { and, asc, eq, sql, type SQL } from 'drizzle-orm';
import { csvLine } from '../domain/csv';
import { seriesColumns, type SeriesColumn, type SeriesFigure } from '../domain/series';
import type { Result } from '../engine';
import * as batches from './batches';
import { db } from './db';
import { entries, molecules, results, tasks } from './db/schema';
import { recordEvent } from './events';
import { require, type Member } from './member';
import { bondName, readStored } from './molecules';

type Bond = Result<'conjugation'>['bonds'][number];

export interface SeriesQuery {
  readonly sort: SeriesColumn;
  readonly descending: boolean;
  readonly page: number;
  readonly pageSize: number;
}

/** A conjugated bond of one row of the batch. */
export interface SeriesRow extends Record<SeriesFigure, number | null> {
  readonly position: number;
  readonly name: string;
  readonly moleculeId: string;
  readonly bond: string;
  readonly kind: string;
  /** K, at which the populations were computed. */
  readonly temperature: number;
  readonly profile: readonly { readonly angle: number; readonly relative: number }[] | null;
}

const bond = sql.raw('"bond"."value"');
/** Every bond of every conjugation answer of a batch. */
const ofBatch = (batchId: string) => and(eq(tasks.batchId, batchId), eq(tasks.kind, 'conjugation'));

const figure = (name: SeriesFigure): SQL => sql`(${bond} ->> ${sql.raw(`'${name}'`)})::float8`;

function sortColumn(column: SeriesColumn): SQL {
  switch (column) {
    case 'position':
      return sql`${entries.position}`;
    case 'name':
      return sql`lower(${entries.name})`;
    case 'kind':
      return sql`${bond} ->> 'kind'`;
    default:
      return figure(column);
  }
}

/** The rows from `offset` on, sorted; what has no value stands last. */
async function readRows(
  batchId: string,
  { sort, descending }: Pick<SeriesQuery, 'sort' | 'descending'>,
  [offset, limit]: readonly [number, number],
): Promise<SeriesRow[]> {
  const direction = sql.raw(descending ? 'desc' : 'asc');
  const rows = await db
    .select({
      position: entries.position,
      name: entries.name,
      molecule: molecules,
      settings: results.settings,
      bond: sql<Bond>`${bond}`,
    })
    .from(tasks)
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
    .innerJoin(results, eq(results.id, tasks.resultId))
    .crossJoinLateral(bondsOfResult)
    .where(ofBatch(batchId))
    .orderBy(
      sql`${sortColumn(sort)} ${direction} nulls last`,
      asc(entries.position),
      sql.raw('"bond"."ordinality"'),
    )
    .limit(limit)
    .offset(offset);
  return rows.map(({ position, name, molecule, settings, bond: found }) => ({
    position,
    name,
    moleculeId: molecule.id,
    bond: bondName(readStored(molecule), found.bond),
    kind: found.kind,
    temperature: (settings as { temperature: number }).temperature,
    profile: found.profile?.map(({ angle, relative }) => ({ angle, relative })) ?? null,
    twist: found.twist,
    difference: found.difference,
    sCisFraction: found.sCisFraction,
    planarSCisCost: found.planarSCisCost,
    barrier: found.barrier,
    meanOverlap: found.meanOverlap,
  }));
}

const bondsOfResult = sql`jsonb_array_elements(${results.details} -> 'bonds') with ordinality as "bond"`;

/** One page of a batch's conjugated bonds. */
export async function list(member: Member, batchId: string, query: SeriesQuery) {
  const batch = await batches.get(member, batchId);
  const [{ total }] = await db
    .select({
      total: sql<number>`coalesce(sum(jsonb_array_length(${results.details} -> 'bonds')), 0)::int`,
    })
    .from(tasks)
    .innerJoin(results, eq(results.id, tasks.resultId))
    .where(ofBatch(batch.id));
  const { page, pageSize } = query;
  const rows = await readRows(batch.id, query, [(page - 1) * pageSize, pageSize]);
  return { batch: { id: batch.id, name: batch.name }, total, rows };
}

/** Rows that are read and written at a time. */
const CHUNK = 500;

/** All conjugated bonds of a batch as a table, a chunk at a time, so that memory does not grow with the batch. */
export async function table(
  member: Member,
  batchId: string,
  query: Pick<SeriesQuery, 'sort' | 'descending'>,
): Promise<{ name: string; lines: AsyncGenerator<string> }> {
  require(member, 'download bundles');
  const batch = await batches.get(member, batchId);
  await recordEvent(db, member, 'download series', batch.id);
  return { name: batch.name, lines: lines(batch.id, query) };
}

async function* lines(
  batchId: string,
  query: Pick<SeriesQuery, 'sort' | 'descending'>,
): AsyncGenerator<string> {
  const figures = seriesColumns.filter(({ header }) => header !== null);
  yield csvLine([
    'row',
    'name',
    'bond',
    'kind',
    ...figures.map(({ header }) => header),
    'temperature_kelvin',
  ]);
  for (let offset = 0; ; offset += CHUNK) {
    const rows = await readRows(batchId, query, [offset, CHUNK]);
    for (const row of rows) {
      yield csvLine([
        row.position,
        row.name,
        row.bond.replace('–', '-'),
        row.kind,
        ...figures.map(({ column }) => {
          const value = row[column as SeriesFigure];
          return value === null ? null : Number(value.toFixed(6));
        }),
        row.temperature,
      ]);
    }
    if (rows.length < CHUNK) return;
  }
}
