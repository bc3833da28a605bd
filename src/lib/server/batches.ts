/** Batches as their team sees them. */
import { and, asc, count, eq } from 'drizzle-orm';
import { db } from './db';
import { batches, entries, molecules, users } from './db/schema';
import { notFound, type Member } from './member';

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
