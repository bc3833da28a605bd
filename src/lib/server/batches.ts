/** Batches as their team sees them. */
import { and, asc, count, desc, eq, inArray, isNotNull, sql } from 'drizzle-orm';
import { db } from './db';
import { batches, entries, molecules, notes, tasks, users } from './db/schema';
import { notFound, type Member } from './member';

export type TaskState = (typeof tasks.$inferSelect)['state'];

/** How many tasks of something are in each state. */
export type StateCounts = Record<TaskState, number>;

const noTasks: StateCounts = { queued: 0, running: 0, done: 0, failed: 0, cancelled: 0 };

/** Counts tasks by state, as columns of a query. */
const stateColumns = {
  queued: sql<number>`(count(${tasks.id}) filter (where ${tasks.state} = 'queued'))::int`,
  running: sql<number>`(count(${tasks.id}) filter (where ${tasks.state} = 'running'))::int`,
  done: sql<number>`(count(${tasks.id}) filter (where ${tasks.state} = 'done'))::int`,
  failed: sql<number>`(count(${tasks.id}) filter (where ${tasks.state} = 'failed'))::int`,
  cancelled: sql<number>`(count(${tasks.id}) filter (where ${tasks.state} = 'cancelled'))::int`,
};

/** One page of a team's submitted batches, the newest first, with the states of their tasks. */
export async function list(member: Member, page: number, pageSize: number) {
  const own = and(eq(batches.teamId, member.teamId), isNotNull(batches.submittedAt));
  const [{ total }] = await db.select({ total: count() }).from(batches).where(own);
  const rows = await db
    .select({
      id: batches.id,
      name: batches.name,
      submittedAt: sql<Date>`${batches.submittedAt}`.mapWith(batches.createdAt),
      maker: users.name,
    })
    .from(batches)
    .leftJoin(users, eq(users.id, batches.createdBy))
    .where(own)
    .orderBy(desc(batches.submittedAt), desc(batches.id))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  const ids = rows.map(({ id }) => id);
  if (ids.length === 0) return { total, rows: [] };
  const states = await db
    .select({ batchId: tasks.batchId, ...stateColumns })
    .from(tasks)
    .where(inArray(tasks.batchId, ids))
    .groupBy(tasks.batchId);
  const sizes = await db
    .select({ batchId: entries.batchId, rows: count() })
    .from(entries)
    .where(inArray(entries.batchId, ids))
    .groupBy(entries.batchId);
  return {
    total,
    rows: rows.map((row) => {
      const { batchId: _batchId, ...counts } = states.find(({ batchId }) => batchId === row.id) ?? {
        batchId: row.id,
        ...noTasks,
      };
      const size = sizes.find(({ batchId }) => batchId === row.id)?.rows ?? 0;
      return { ...row, size, counts };
    }),
  };
}

/** How far a batch is: its tasks by state, and the share of the work that is done, 0 to 1. */
export async function progress(member: Member, batchId: string) {
  const [row] = await db
    .select({
      ...stateColumns,
      share: sql<number>`coalesce(avg(case when ${tasks.state} in ('queued', 'running') then ${tasks.progress} else 1 end), 1)::float8`,
    })
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(and(eq(tasks.batchId, batchId), eq(batches.teamId, member.teamId)));
  const { share, ...counts } = row;
  return { counts, share };
}

export const entrySorts = ['position', 'name', 'formula', 'failed'] as const;
export type EntrySort = (typeof entrySorts)[number];

export interface EntryQuery {
  /** Only rows with a task in this state; 'error' for rows that could not be read. */
  readonly state: TaskState | 'error' | null;
  readonly sort: EntrySort;
  readonly descending: boolean;
  readonly page: number;
  readonly pageSize: number;
}

/** One page of a batch's rows with the states of their tasks. */
export async function listEntries(member: Member, batchId: string, query: EntryQuery) {
  const batch = await get(member, batchId);
  const chosen = and(eq(entries.batchId, batch.id), stateCondition(query.state));
  const [{ total }] = await db.select({ total: count() }).from(entries).where(chosen);
  const direction = query.descending ? desc : asc;
  const rows = await db
    .select({
      id: entries.id,
      position: entries.position,
      line: entries.line,
      name: entries.name,
      verdict: entries.verdict,
      remarks: entries.remarks,
      moleculeId: entries.moleculeId,
      formula: molecules.formula,
      openNotes: sql<number>`(select count(*)::int from ${notes} where ${notes.moleculeId} = ${entries.moleculeId} and ${notes.parentId} is null and ${notes.resolvedAt} is null)`,
      ...stateColumns,
      failure: sql<{
        message: string;
      } | null>`(array_agg(${tasks.error}) filter (where ${tasks.state} = 'failed'))[1]`,
    })
    .from(entries)
    .leftJoin(molecules, eq(molecules.id, entries.moleculeId))
    .leftJoin(tasks, eq(tasks.entryId, entries.id))
    .where(chosen)
    .groupBy(entries.id, molecules.formula)
    .orderBy(direction(sortColumn(query.sort)), asc(entries.position))
    .limit(query.pageSize)
    .offset((query.page - 1) * query.pageSize);
  return { batch, total, rows };
}

function stateCondition(state: EntryQuery['state']) {
  if (state === null) return undefined;
  if (state === 'error') return eq(entries.verdict, 'error');
  return sql`exists (select 1 from ${tasks} where ${tasks.entryId} = ${entries.id} and ${tasks.state} = ${state})`;
}

function sortColumn(sort: EntrySort) {
  switch (sort) {
    case 'position':
      return entries.position;
    case 'name':
      return sql`lower(${entries.name})`;
    case 'formula':
      return molecules.formula;
    case 'failed':
      return stateColumns.failed;
  }
}

/** One page of a draft's or a batch's rows, in order, with how many there are of each verdict. */
export async function listRows(member: Member, batchId: string, page: number, pageSize: number) {
  const batch = await get(member, batchId);
  const rows = await db
    .select({
      id: entries.id,
      position: entries.position,
      line: entries.line,
      name: entries.name,
      input: entries.input,
      verdict: entries.verdict,
      remarks: entries.remarks,
      chosenBonds: entries.chosenBonds,
      moleculeId: entries.moleculeId,
      smiles: molecules.smiles,
      formula: molecules.formula,
      atomCount: molecules.atomCount,
      rotors: molecules.rotors,
      hasGeometry: molecules.hasGeometry,
    })
    .from(entries)
    .leftJoin(molecules, eq(molecules.id, entries.moleculeId))
    .where(eq(entries.batchId, batch.id))
    .orderBy(asc(entries.position))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  const verdicts = await db
    .select({ verdict: entries.verdict, rows: count() })
    .from(entries)
    .where(eq(entries.batchId, batch.id))
    .groupBy(entries.verdict);
  const counts = { ready: 0, warning: 0, error: 0 };
  for (const { verdict, rows: n } of verdicts) counts[verdict] = n;
  const [geometry] = await db
    .select({ any: sql<boolean>`coalesce(bool_or(${molecules.hasGeometry}), false)` })
    .from(entries)
    .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
    .where(eq(entries.batchId, batch.id));
  return { batch, rows, counts, hasGeometry: geometry.any };
}

/** A batch of the member's team; a draft only for its maker. */
export async function get(member: Member, batchId: string) {
  const [batch] = await db
    .select({
      id: batches.id,
      name: batches.name,
      source: batches.source,
      reading: batches.reading,
      plan: batches.plan,
      createdAt: batches.createdAt,
      submittedAt: batches.submittedAt,
      createdBy: batches.createdBy,
      maker: users.name,
    })
    .from(batches)
    .leftJoin(users, eq(users.id, batches.createdBy))
    .where(and(eq(batches.id, batchId), eq(batches.teamId, member.teamId)));
  if (!batch || (!batch.submittedAt && batch.createdBy !== member.userId)) notFound('batch');
  return batch;
}
