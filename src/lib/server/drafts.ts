/** Drafts of batches: rows are read into them, looked at by their maker, and submitted or thrown away. */
import { and, eq, isNull, lt, sql } from 'drizzle-orm';
import type { RowBondChoice, Format, Reading } from '../domain/submission';
import { db, type Executor } from './db';
import { batches, entries, molecules } from './db/schema';
import { notFound, require, type Member } from './member';
import { readRows, type ReadRow } from './reading';
import { splitRows, type RawRow } from './rows';

/** Rows are written in chunks of this size, so that no statement grows without bound. */
const CHUNK = 200;

export type Source = (typeof batches.$inferSelect)['source'];

export interface DraftOptions {
  readonly name: string;
  readonly source: Source;
  readonly format: Format;
  readonly reading: Reading;
}

/** How far reading is, for the person who waits. */
export interface ReadingProgress {
  readonly rows: number;
  readonly errors: number;
}

/**
 * Reads an upload into a new draft and returns its id. A file that cannot be taken at all throws UploadError and leaves
 * no draft behind; a bad row is a row with an error.
 */
export async function readUpload(
  member: Member,
  { format, ...draft }: DraftOptions,
  bytes: AsyncIterable<Uint8Array>,
  report: (progress: ReadingProgress) => void,
): Promise<string> {
  return readIntoDraft(member, draft, splitRows(bytes, format), report);
}

/** As `readUpload`, of rows that are split already. */
export async function readIntoDraft(
  member: Member,
  draft: Omit<DraftOptions, 'format'>,
  rows: AsyncIterable<RawRow>,
  report: (progress: ReadingProgress) => void,
): Promise<string> {
  const batchId = await openDraft(member, draft);
  let progress: ReadingProgress = { rows: 0, errors: 0 };
  let chunk: ReadRow[] = [];
  const write = async () => {
    await addRows(member, batchId, chunk);
    const errors = chunk.filter(({ verdict }) => verdict === 'error').length;
    progress = { rows: progress.rows + chunk.length, errors: progress.errors + errors };
    chunk = [];
    report(progress);
  };
  try {
    for await (const row of readRows(rows, draft.reading)) {
      chunk.push(row);
      if (chunk.length >= CHUNK) await write();
    }
    if (chunk.length > 0) await write();
    return batchId;
  } catch (error) {
    await discardDraft(member, batchId);
    throw error;
  }
}

/** Opens a draft for the member: rows are added to it, looked at, and submitted or thrown away. */
async function openDraft(member: Member, draft: Omit<DraftOptions, 'format'>): Promise<string> {
  require(member, 'submit molecules');
  const [{ id }] = await db
    .insert(batches)
    .values({ teamId: member.teamId, createdBy: member.userId, ...draft })
    .returning({ id: batches.id });
  return id;
}

/** The member's own draft, locked until the transaction ends; nobody else sees a batch before it is submitted. */
export async function ownDraft(executor: Executor, member: Member, batchId: string) {
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
async function addRows(member: Member, batchId: string, rows: readonly ReadRow[]): Promise<void> {
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

/**
 * Stores the structures that the team has not got yet; returns the ids by digest. Those it has are locked by an update
 * that changes nothing, so that none is tidied away before a row of the draft names it.
 */
async function storeStructures(
  executor: Executor,
  member: Member,
  rows: readonly ReadRow[],
): Promise<Map<string, string>> {
  const byDigest = new Map(
    rows.flatMap(({ structure }) => (structure ? [[structure.digest, structure] as const] : [])),
  );
  if (byDigest.size === 0) return new Map();
  // In one order for everybody: two uploads of the same molecules must not wait for each other.
  const sorted = [...byDigest.values()].sort((a, b) => (a.digest < b.digest ? -1 : 1));
  const stored = await executor
    .insert(molecules)
    .values(sorted.map((structure) => ({ teamId: member.teamId, ...structure })))
    .onConflictDoUpdate({
      target: [molecules.teamId, molecules.digest],
      set: { digest: sql`excluded.digest` },
    })
    .returning({ id: molecules.id, digest: molecules.digest });
  return new Map(stored.map(({ id, digest }) => [digest, id]));
}

/** Sets the bonds of one row of a draft that will be scanned, or the two of its map. */
export async function chooseBonds(
  member: Member,
  batchId: string,
  entryId: string,
  { purpose, bonds }: RowBondChoice,
): Promise<void> {
  await db.transaction(async (transaction) => {
    await ownDraft(transaction, member, batchId);
    const changed = await transaction
      .update(entries)
      .set(purpose === 'map' ? { mapBonds: bonds } : { chosenBonds: bonds })
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

/** How long a draft waits for its maker, days. */
export const DRAFT_DAYS = 30;

/** Throws drafts away that nobody submitted for a long time. */
export async function forgetOld(): Promise<void> {
  await db
    .delete(batches)
    .where(
      and(
        isNull(batches.submittedAt),
        lt(batches.createdAt, sql`now() - make_interval(days => ${DRAFT_DAYS})`),
      ),
    );
}
