/** What stored results take. The size of each is written down when it is stored, so that sums are read off an index. */
import { and, eq, sql } from 'drizzle-orm';
import { db, type Executor } from './db';
import { results } from './db/schema';

export const MEGABYTE = 1_000_000;

/** Writes down what a result takes; to be called after anything was added to it. */
export async function measure(executor: Executor, resultId: string): Promise<void> {
  await executor
    .update(results)
    .set({ bytes: sql`result_bytes(${results.id})` })
    .where(eq(results.id, resultId));
}

/** Bytes of a team's results, those computed for one person where they are named. */
export async function storedBytes(
  teamId: string,
  userId: string | null = null,
  executor: Executor = db,
): Promise<number> {
  const [{ bytes }] = await executor
    .select({ bytes: sql<number>`coalesce(sum(${results.bytes}), 0)::float8` })
    .from(results)
    .where(and(eq(results.teamId, teamId), userId ? eq(results.madeFor, userId) : undefined));
  return bytes;
}
