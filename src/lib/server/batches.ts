/** Batches as their team sees them. */
import { and, asc, count, desc, eq, inArray, isNotNull, isNull, sql, type SQL } from 'drizzle-orm';
import { db } from './db';
import { batches, entries, molecules, notes, tasks, users } from './db/schema';
import { notFound, type InTeam, type Member } from './member';

export type TaskState = (typeof tasks.$inferSelect)['state'];

/** How many tasks of something are in each state. */
export type StateCounts = Record<TaskState, number>;

export const noTasks: StateCounts = { queued: 0, running: 0, done: 0, failed: 0, cancelled: 0 };

/** Counts tasks by state, as columns of a query that an index alone answers. */
export const stateColumns = {
  queued: sql<number>`(count(*) filter (where ${tasks.state} = 'queued'))::int`,
  running: sql<number>`(count(*) filter (where ${tasks.state} = 'running'))::int`,
  done: sql<number>`(count(*) filter (where ${tasks.state} = 'done'))::int`,
  failed: sql<number>`(count(*) filter (where ${tasks.state} = 'failed'))::int`,
  cancelled: sql<number>`(count(*) filter (where ${tasks.state} = 'cancelled'))::int`,
};

/** Whose batches are meant: the whole team's, the member's own, or those of everybody else in the team. */
export type Whose = 'team' | 'own' | 'others';

/** A condition on submitted batches of the member's team. */
export function submittedBy(member: Member, whose: Whose) {
  return and(
    eq(batches.teamId, member.teamId),
    isNotNull(batches.submittedAt),
    whose === 'own' ? eq(batches.createdBy, member.userId) : undefined,
    whose === 'others' ? sql`${batches.createdBy} is distinct from ${member.userId}` : undefined,
  );
}

export const batchColumns = {
  id: batches.id,
  name: batches.name,
  submittedAt: sql<Date>`${batches.submittedAt}`.mapWith(batches.createdAt),
  maker: users.name,
};

/** The states of the tasks of batches, by batch. */
export async function statesOf(ids: readonly string[]): Promise<Map<string, StateCounts>> {
  if (ids.length === 0) return new Map();
  const rows = await db
    .select({ batchId: tasks.batchId, ...stateColumns })
    .from(tasks)
    .where(inArray(tasks.batchId, [...ids]))
    .groupBy(tasks.batchId);
  return new Map(rows.map(({ batchId, ...counts }) => [batchId, counts]));
}

/** One page of a team's submitted batches, the newest first, with the states of their tasks. */
export async function list(member: Member, page: number, pageSize: number, whose: Whose = 'team') {
  const own = submittedBy(member, whose);
  const [{ total }] = await db.select({ total: count() }).from(batches).where(own);
  const rows = await db
    .select(batchColumns)
    .from(batches)
    .leftJoin(users, eq(users.id, batches.createdBy))
    .where(own)
    .orderBy(desc(batches.submittedAt), desc(batches.id))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  const ids = rows.map(({ id }) => id);
  if (ids.length === 0) return { total, rows: [] };
  const states = await statesOf(ids);
  const sizes = await db
    .select({ batchId: entries.batchId, rows: count() })
    .from(entries)
    .where(inArray(entries.batchId, ids))
    .groupBy(entries.batchId);
  return {
    total,
    rows: rows.map((row) => {
      const counts = states.get(row.id) ?? noTasks;
      const size = sizes.find(({ batchId }) => batchId === row.id)?.rows ?? 0;
      return { ...row, size, counts };
    }),
  };
}

/** How far a batch is: its tasks by state, and the share of the work that is done, 0 to 1. */
export async function progress(member: Member, batchId: string) {
  const own = and(eq(tasks.batchId, batchId), eq(batches.teamId, member.teamId));
  const [counts] = await db
    .select(stateColumns)
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(own);
  const [{ begun }] = await db
    .select({ begun: sql<number>`coalesce(sum(${tasks.progress}), 0)::float8` })
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(and(own, eq(tasks.state, 'running')));
  const ended = counts.done + counts.failed + counts.cancelled;
  const total = ended + counts.queued + counts.running;
  return { counts, share: total === 0 ? 1 : Math.min(1, (ended + begun) / total) };
}

export const entrySorts = ['position', 'name', 'formula', 'failed'] as const;
export type EntrySort = (typeof entrySorts)[number];

export interface EntryQuery {
  /** Only rows with a task in this state; 'error' and 'warning' for rows that were read with one. */
  readonly state: TaskState | 'error' | 'warning' | null;
  readonly sort: EntrySort;
  readonly descending: boolean;
  readonly page: number;
  readonly pageSize: number;
}

/** One page of a batch's rows with the states of their tasks. */
export async function listEntries(member: Member, batchId: string, query: EntryQuery) {
  const batch = await get(member, batchId);
  const chosen = and(eq(entries.batchId, batch.id), stateCondition(batch.id, query.state));
  const [{ total }] = await db.select({ total: count() }).from(entries).where(chosen);
  const ids = await sortedIds(batch.id, chosen, query);
  if (ids.length === 0) return { batch, total, rows: [] };
  const found = await db
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
    })
    .from(entries)
    .leftJoin(molecules, eq(molecules.id, entries.moleculeId))
    .where(inArray(entries.id, ids));
  const states = await entryStates(ids);
  const rows = found
    .map((row) => ({
      ...row,
      ...(states.get(row.id) ?? { ...noTasks, removed: 0, failure: null }),
    }))
    .sort((a, b) => ids.indexOf(a.id) - ids.indexOf(b.id));
  return { batch, total, rows };
}

/** The rows of one page in their order; only ids, so that sorting a large batch moves little. */
async function sortedIds(
  batchId: string,
  chosen: SQL | undefined,
  { sort, descending, page, pageSize }: EntryQuery,
): Promise<string[]> {
  const failures = db
    .select({ entryId: tasks.entryId, failed: count().as('failed') })
    .from(tasks)
    .where(and(eq(tasks.batchId, batchId), eq(tasks.state, 'failed')))
    .groupBy(tasks.entryId)
    .as('failures');
  const column = {
    position: entries.position,
    name: sql`lower(${entries.name})`,
    formula: molecules.formula,
    failed: sql`coalesce(${failures.failed}, 0)`,
  }[sort];
  // PostgreSQL leaves out the joins that the chosen order has no use for.
  const rows = await db
    .select({ id: entries.id })
    .from(entries)
    .leftJoin(molecules, eq(molecules.id, entries.moleculeId))
    .leftJoin(failures, eq(failures.entryId, entries.id))
    .where(chosen)
    .orderBy((descending ? desc : asc)(column), asc(entries.position))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  return rows.map(({ id }) => id);
}

/** The states of some rows' tasks, and why one of them failed. */
async function entryStates(entryIds: readonly string[]) {
  const states = await db
    .select({
      entryId: tasks.entryId,
      ...stateColumns,
      removed: sql<number>`(count(*) filter (where ${tasks.state} = 'done' and ${tasks.resultId} is null))::int`,
      failure: sql<{
        message: string;
      } | null>`(array_agg(${tasks.error}) filter (where ${tasks.state} = 'failed'))[1]`,
    })
    .from(tasks)
    .where(inArray(tasks.entryId, [...entryIds]))
    .groupBy(tasks.entryId);
  return new Map(states.map(({ entryId, ...state }) => [entryId, state]));
}

function stateCondition(batchId: string, state: EntryQuery['state']) {
  if (state === null) return undefined;
  if (state === 'error' || state === 'warning') return eq(entries.verdict, state);
  return inArray(
    entries.id,
    db
      .select({ id: tasks.entryId })
      .from(tasks)
      .where(and(eq(tasks.batchId, batchId), eq(tasks.state, state))),
  );
}

/** How many tasks of a batch are done with a result that was removed since. */
export function countRemoved(batchId: string): Promise<number> {
  return db.$count(
    tasks,
    and(eq(tasks.batchId, batchId), eq(tasks.state, 'done'), isNull(tasks.resultId)),
  );
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
      mapBonds: entries.mapBonds,
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
export async function get(member: InTeam, batchId: string) {
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
      finishedAt: batches.finishedAt,
      pinnedAt: batches.pinnedAt,
      removalAt: batches.removalAt,
      removedAt: batches.removedAt,
      maker: users.name,
    })
    .from(batches)
    .leftJoin(users, eq(users.id, batches.createdBy))
    .where(and(eq(batches.id, batchId), eq(batches.teamId, member.teamId)));
  if (!batch || (!batch.submittedAt && batch.createdBy !== member.userId)) notFound('batch');
  return batch;
}
