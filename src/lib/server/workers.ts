/** The workers that were seen: their signs of life, and what an operator wants of each. */
import { and, desc, eq, gt, lt, ne, sql } from 'drizzle-orm';
import type { MetricObjectWithValues } from 'prom-client';
import type { InstalledVersions } from '../domain/second-opinions';
import { db, type Executor } from './db';
import { workers } from './db/schema';

/** A worker that has been silent for this long is gone. */
const SILENCE = sql`now() - interval '20 seconds'`;
/** Workers that are gone are remembered for this long. */
const KEPT = sql`now() - interval '2 days'`;

export type WorkerState = (typeof workers.$inferSelect)['state'];
export type WorkerOrder = (typeof workers.$inferSelect)['wanted'];

/** What a worker says of itself with every sign of life. */
export interface WorkerSign {
  readonly name: string;
  readonly version: string;
  readonly concurrency: number;
  readonly programs: InstalledVersions;
  readonly startedAt: Date;
  readonly state: WorkerState;
  readonly metrics: readonly unknown[];
}

/** Writes a sign of life and answers what is wanted of the worker. */
export async function beat(sign: WorkerSign): Promise<WorkerOrder> {
  const { state, metrics } = sign;
  const [{ wanted }] = await db
    .insert(workers)
    .values(sign)
    .onConflictDoUpdate({ target: workers.name, set: { state, metrics, beatAt: sql`now()` } })
    .returning({ wanted: workers.wanted });
  return wanted;
}

/** Says that a worker ended by itself. */
export async function leave(name: string): Promise<void> {
  await db.update(workers).set({ state: 'gone', metrics: [] }).where(eq(workers.name, name));
}

const isLiving = and(ne(workers.state, 'gone'), gt(workers.beatAt, SILENCE));

/** Every worker of late, the living ones first, then those that were seen last. */
export function listWorkers() {
  return db
    .select({
      name: workers.name,
      version: workers.version,
      concurrency: workers.concurrency,
      state: sql<WorkerState>`case when ${isLiving} then ${workers.state} else 'gone' end`,
      wanted: workers.wanted,
      startedAt: workers.startedAt,
      beatAt: workers.beatAt,
    })
    .from(workers)
    .orderBy(desc(sql`(${isLiving})`), desc(workers.startedAt))
    .limit(50);
}

/** Tells a living worker what is wanted of it, as a part of the caller's transaction; false where it is gone. */
export async function order(
  executor: Executor,
  name: string,
  wanted: WorkerOrder,
): Promise<boolean> {
  const told = await executor
    .update(workers)
    .set({ wanted })
    .where(and(eq(workers.name, name), isLiving))
    .returning({ name: workers.name });
  return told.length > 0;
}

/** What each living worker measured, as of its last sign of life. */
export async function metricsOfLiving(): Promise<MetricObjectWithValues<never>[][]> {
  const rows = await db.select({ metrics: workers.metrics }).from(workers).where(isLiving);
  return rows.map(({ metrics }) => metrics as MetricObjectWithValues<never>[]);
}

/** Forgets workers that have been gone for a while. */
export async function forgetGone(): Promise<void> {
  await db.delete(workers).where(lt(workers.beatAt, KEPT));
}
