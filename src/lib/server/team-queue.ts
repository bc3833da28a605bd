/** What a team's queue shows. */
import { and, asc, count, eq, min } from 'drizzle-orm';
import { db } from './db';
import { batches, entries, tasks, users } from './db/schema';
import type { Member } from './member';

/** What runs in the member's team at the moment, the longest first, and how much waits in each of its batches. */
export async function queueOf(member: Member) {
  const running = await db
    .select({
      id: tasks.id,
      kind: tasks.kind,
      progress: tasks.progress,
      stage: tasks.stage,
      startedAt: tasks.startedAt,
      name: entries.name,
      moleculeId: entries.moleculeId,
      batchId: batches.id,
      batchName: batches.name,
    })
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .where(and(eq(batches.teamId, member.teamId), eq(tasks.state, 'running')))
    .orderBy(asc(tasks.startedAt))
    .limit(100);
  const waiting = await db
    .select({
      batchId: batches.id,
      batchName: batches.name,
      maker: users.name,
      count: count(),
      since: min(tasks.queuedAt),
    })
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .leftJoin(users, eq(users.id, batches.createdBy))
    .where(and(eq(batches.teamId, member.teamId), eq(tasks.state, 'queued')))
    .groupBy(batches.id, users.name)
    .orderBy(asc(min(tasks.queuedAt)))
    .limit(100);
  return { running, waiting };
}
