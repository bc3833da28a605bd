/** Pinned batches: their results stay, whatever their age. */
import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm';
import { db } from './db';
import { batches } from './db/schema';
import { recordEvent } from './events';
import { lockTeam } from './limits';
import { notFound, require, type Member } from './member';

/** Pins a batch of the member's team, which also takes back an announced removal; nothing happens to a pinned one. */
export function pin(member: Member, batchId: string): Promise<void> {
  return change(member, batchId, 'pin batch');
}

/** Takes a pin away; the batch's age counts again, and a removal is announced anew before anything goes. */
export function unpin(member: Member, batchId: string): Promise<void> {
  return change(member, batchId, 'unpin batch');
}

async function change(
  member: Member,
  batchId: string,
  action: 'pin batch' | 'unpin batch',
): Promise<void> {
  require(member, 'pin batches');
  const own = and(
    eq(batches.id, batchId),
    eq(batches.teamId, member.teamId),
    isNotNull(batches.submittedAt),
  );
  await db.transaction(async (transaction) => {
    // A removal holds the same lock, so a pin is set before it or after it, never in the middle.
    await lockTeam(transaction, member.teamId);
    const [found] = await transaction.select({ id: batches.id }).from(batches).where(own);
    if (!found) notFound('batch');
    const changed = await transaction
      .update(batches)
      .set(
        action === 'pin batch'
          ? { pinnedAt: sql`now()`, pinnedBy: member.userId, removalAt: null }
          : { pinnedAt: null, pinnedBy: null },
      )
      .where(
        and(own, action === 'pin batch' ? isNull(batches.pinnedAt) : isNotNull(batches.pinnedAt)),
      )
      .returning({ id: batches.id });
    if (changed.length > 0) await recordEvent(transaction, member, action, `batch:${batchId}`);
  });
}
