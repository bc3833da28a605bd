/** Batches and their rows from a place on, for those who read lists page after page. */
import { and, asc, desc, eq, gt, isNotNull, sql } from 'drizzle-orm';
import type { Remark } from '../domain/submission';
import { batchColumns, get, noTasks, stateColumns, statesOf, type StateCounts } from './batches';
import { db } from './db';
import { batches, entries, tasks, users } from './db/schema';
import type { Member } from './member';

/** Where a list of batches goes on: after the one submitted at this time with this id. */
export type AfterBatch = readonly [submittedAt: string, id: string];

/** Submitted batches of a team after a place, the newest first, with the states of their tasks. */
export async function listAfter(member: Member, after: AfterBatch | null, count: number) {
  const rows = await db
    // A Date holds milliseconds, the database microseconds: the place in the list is told in full.
    .select({ ...batchColumns, place: sql<string>`${batches.submittedAt}::text` })
    .from(batches)
    .leftJoin(users, eq(users.id, batches.createdBy))
    .where(
      and(
        eq(batches.teamId, member.teamId),
        isNotNull(batches.submittedAt),
        after
          ? sql`(${batches.submittedAt}, ${batches.id}) < (${after[0]}::timestamptz, ${after[1]}::uuid)`
          : undefined,
      ),
    )
    .orderBy(desc(batches.submittedAt), desc(batches.id))
    .limit(count);
  const states = await statesOf(rows.map(({ id }) => id));
  return rows.map((row) => ({ ...row, counts: states.get(row.id) ?? noTasks }));
}

/** Rows of a batch after a position, in their order, with the states of their tasks. */
export async function listEntriesAfter(
  member: Member,
  batchId: string,
  after: number,
  count: number,
) {
  const batch = await get(member, batchId);
  return db
    .select({
      id: entries.id,
      position: entries.position,
      name: entries.name,
      verdict: entries.verdict,
      remarks: sql<Remark[]>`${entries.remarks}`,
      moleculeId: entries.moleculeId,
      counts: sql<StateCounts>`json_build_object(
        'queued', ${stateColumns.queued}, 'running', ${stateColumns.running}, 'done', ${stateColumns.done},
        'failed', ${stateColumns.failed}, 'cancelled', ${stateColumns.cancelled})`,
    })
    .from(entries)
    .leftJoin(tasks, eq(tasks.entryId, entries.id))
    .where(and(eq(entries.batchId, batch.id), gt(entries.position, after)))
    .groupBy(entries.id)
    .orderBy(asc(entries.position))
    .limit(count);
}
