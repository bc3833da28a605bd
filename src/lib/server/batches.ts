/** Batches: drafts that their maker looks at, and what was submitted from them. */
import { and, asc, count, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { ChosenBonds, Plan, Reading } from '../domain/submission';
import { CHEMIST_BATCH_LIMIT, may } from '../domain/roles';
import { db, type Executor } from './db';
import { batches, entries, molecules, tasks, users } from './db/schema';
import { recordEvent } from './events';
import { tell } from './live';
import { notFound, require, type Member } from './member';
import { planTasks, type PlannedTask } from './plans';
import { enqueue } from './queue';
import type { ReadRow } from './reading';
import { findStored, identityOf } from './results';
import { waitingOf } from './tasks';

/** Rows and tasks are written in chunks of this size, so that no statement grows without bound. */
const CHUNK = 500;

export type Source = (typeof batches.$inferSelect)['source'];

/** A person's mistake in what they submit, in a sentence for them. */
export class SubmissionError extends Error {}

/** Opens a draft for the member: rows are added to it, looked at, and submitted or thrown away. */
export async function openDraft(
  member: Member,
  draft: { name: string; source: Source; reading: Reading },
): Promise<string> {
  require(member, 'submit molecules');
  const [{ id }] = await db
    .insert(batches)
    .values({ teamId: member.teamId, createdBy: member.userId, ...draft })
    .returning({ id: batches.id });
  return id;
}

/** The member's own draft; nobody else sees a batch before it is submitted. */
async function ownDraft(executor: Executor, member: Member, batchId: string) {
  const [draft] = await executor
    .select()
    .from(batches)
    .where(
      and(
        eq(batches.id, batchId),
        eq(batches.teamId, member.teamId),
        eq(batches.createdBy, member.userId),
        isNull(batches.submittedAt),
      ),
    )
    .for('update');
  return draft ?? notFound('draft');
}

/** Adds rows that were read to a draft; the same structure is stored once in a team. */
export async function addRows(
  member: Member,
  batchId: string,
  rows: readonly ReadRow[],
): Promise<void> {
  await db.transaction(async (transaction) => {
    await ownDraft(transaction, member, batchId);
    const [{ next }] = await transaction
      .select({ next: sql<number>`coalesce(max(${entries.position}), 0)::int + 1` })
      .from(entries)
      .where(eq(entries.batchId, batchId));
    for (let from = 0; from < rows.length; from += CHUNK) {
      const chunk = rows.slice(from, from + CHUNK);
      const ids = await storeStructures(transaction, member, chunk);
      await transaction.insert(entries).values(
        chunk.map((row, offset) => ({
          batchId,
          position: next + from + offset,
          line: row.line,
          name: row.name,
          input: row.input,
          moleculeId: row.structure ? ids.get(row.structure.digest)! : null,
          verdict: row.verdict,
          remarks: row.remarks,
        })),
      );
    }
  });
}

/** Stores the structures that the team has not got yet; returns the ids by digest. */
async function storeStructures(
  executor: Executor,
  member: Member,
  rows: readonly ReadRow[],
): Promise<Map<string, string>> {
  const byDigest = new Map(
    rows.flatMap(({ structure }) => (structure ? [[structure.digest, structure] as const] : [])),
  );
  if (byDigest.size === 0) return new Map();
  await executor
    .insert(molecules)
    .values([...byDigest.values()].map((structure) => ({ teamId: member.teamId, ...structure })))
    .onConflictDoNothing();
  const stored = await executor
    .select({ id: molecules.id, digest: molecules.digest })
    .from(molecules)
    .where(
      and(eq(molecules.teamId, member.teamId), inArray(molecules.digest, [...byDigest.keys()])),
    );
  return new Map(stored.map(({ id, digest }) => [digest, id]));
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
  return { batch, rows, counts };
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

/** Sets the bonds of one row of a draft that will be scanned. */
export async function chooseBonds(
  member: Member,
  batchId: string,
  entryId: string,
  chosenBonds: ChosenBonds,
): Promise<void> {
  await db.transaction(async (transaction) => {
    await ownDraft(transaction, member, batchId);
    const changed = await transaction
      .update(entries)
      .set({ chosenBonds })
      .where(and(eq(entries.id, entryId), eq(entries.batchId, batchId)))
      .returning({ id: entries.id });
    if (changed.length === 0) notFound('row');
  });
}

/** Throws a draft away. */
export async function discardDraft(member: Member, batchId: string): Promise<void> {
  await db.transaction(async (transaction) => {
    await ownDraft(transaction, member, batchId);
    await transaction.delete(batches).where(eq(batches.id, batchId));
  });
}

/**
 * Submits a draft: the batch, its tasks and their jobs in one transaction, so that nothing is half there. Tasks whose
 * answer the team already has are done at once with it. Bad rows get no task and hinder no other.
 */
export async function submit(member: Member, batchId: string, plan: Plan) {
  require(member, 'submit molecules');
  return db.transaction(async (transaction) => {
    const draft = await ownDraft(transaction, member, batchId);
    const rows = await transaction
      .select({
        id: entries.id,
        chosenBonds: entries.chosenBonds,
        moleculeId: molecules.id,
        rotors: molecules.rotors,
        hasGeometry: molecules.hasGeometry,
      })
      .from(entries)
      .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
      .where(eq(entries.batchId, batchId))
      .orderBy(asc(entries.position));
    checkSize(member, rows.length);
    await transaction
      .update(batches)
      .set({ plan, submittedAt: sql`now()` })
      .where(eq(batches.id, batchId));
    const ahead = await waitingOf(transaction, member);
    let queued = 0;
    let reused = 0;
    for (let from = 0; from < rows.length; from += CHUNK) {
      const planned = rows.slice(from, from + CHUNK).flatMap((row) => planTasks(row, plan));
      const written = await writeTasks(transaction, batchId, planned);
      await enqueue(
        transaction,
        written.map((id, position) => ({ id, priority: -(ahead + queued + position) })),
      );
      queued += written.length;
      reused += planned.length - written.length;
    }
    if (queued + reused === 0) {
      throw new SubmissionError('Nothing in this batch can be computed with what was chosen.');
    }
    await recordEvent(transaction, member, 'submit batch', batchId, {
      name: draft.name,
      queued,
      reused,
    });
    await tell(transaction, 'batch-changed', [batchId]);
    return { queued, reused };
  });
}

function checkSize(member: Member, rowCount: number): void {
  if (rowCount === 0) throw new SubmissionError('No row of this batch can be computed.');
  if (rowCount > CHEMIST_BATCH_LIMIT && !may(member.role, 'submit bulk batches')) {
    throw new SubmissionError(
      `Your role submits at most ${CHEMIST_BATCH_LIMIT} molecules at a time; this batch has ${rowCount}. A modeler of the team can submit it.`,
    );
  }
}

/** Writes tasks, those with a stored answer as done; returns the ids of those that are to be computed. */
async function writeTasks(
  executor: Executor,
  batchId: string,
  planned: readonly PlannedTask[],
): Promise<string[]> {
  if (planned.length === 0) return [];
  const stored = await findStored(executor, planned);
  const written = await executor
    .insert(tasks)
    .values(
      planned.map((task) => {
        const resultId = stored.get(identityOf(task));
        const { entryId, kind, settings } = task;
        return resultId === undefined
          ? { batchId, entryId, kind, settings }
          : {
              batchId,
              entryId,
              kind,
              settings,
              state: 'done' as const,
              progress: 1,
              resultId,
              reused: true,
              finishedAt: sql`now()`,
            };
      }),
    )
    .returning({ id: tasks.id, state: tasks.state });
  return written.filter(({ state }) => state === 'queued').map(({ id }) => id);
}
