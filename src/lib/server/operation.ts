/** How the machines do: queue, workers, failures and storage. No names and no content of any team's work. */
import { and, asc, count, desc, eq, gt, inArray, isNotNull, min, sql } from 'drizzle-orm';
import { machineFaults } from '../domain/operation';
import { db } from './db';
import { entries, molecules, tasks, teams, webhookDeliveries, webhooks } from './db/schema';

const OPEN = ['queued', 'running'] as const;
const SHOWN_TASKS = 100;
const SHOWN_FAULTS = 25;

const countWhere = (condition: ReturnType<typeof sql>) =>
  sql<number>`count(*) filter (where ${condition})::int`;

/** How many tasks of each kind wait and run. */
export function queueDepth() {
  return db
    .select({
      kind: tasks.kind,
      queued: countWhere(sql`${tasks.state} = 'queued'`),
      running: countWhere(sql`${tasks.state} = 'running'`),
    })
    .from(tasks)
    .where(inArray(tasks.state, [...OPEN]))
    .groupBy(tasks.kind)
    .orderBy(asc(tasks.kind));
}

/** How long the oldest waiting task waits, seconds; 0 where none does. */
export async function oldestWaitingSeconds(): Promise<number> {
  const [{ seconds }] = await db
    .select({
      seconds: sql<number>`coalesce(extract(epoch from now() - ${min(tasks.queuedAt)}), 0)::float8`,
    })
    .from(tasks)
    .where(eq(tasks.state, 'queued'));
  return seconds;
}

/** What runs on which worker, the longest first, as sizes and times. */
export function runningTasks() {
  return db
    .select({
      id: tasks.id,
      worker: tasks.worker,
      kind: tasks.kind,
      attempt: tasks.attempt,
      atoms: molecules.atomCount,
      progress: tasks.progress,
      startedAt: tasks.startedAt,
      beatAt: tasks.beatAt,
    })
    .from(tasks)
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
    .where(eq(tasks.state, 'running'))
    .orderBy(asc(tasks.startedAt))
    .limit(SHOWN_TASKS);
}

const reasonOf = sql<string>`${tasks.error}->>'code'`;

/** Failures of the last seven days by reason, the most frequent first. */
export function failuresByReason() {
  return db
    .select({
      reason: reasonOf,
      day: countWhere(sql`${tasks.finishedAt} > now() - interval '24 hours'`),
      week: count(),
    })
    .from(tasks)
    .where(and(eq(tasks.state, 'failed'), gt(tasks.finishedAt, sql`now() - interval '7 days'`)))
    .groupBy(reasonOf)
    .orderBy(desc(count()), asc(reasonOf));
}

/** The latest tasks that failed through machine or program, whatever their age. */
export function machineFailures() {
  return db
    .select({
      id: tasks.id,
      kind: tasks.kind,
      reason: reasonOf,
      atoms: molecules.atomCount,
      attempt: tasks.attempt,
      worker: tasks.worker,
      finishedAt: tasks.finishedAt,
    })
    .from(tasks)
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
    .where(and(eq(tasks.state, 'failed'), inArray(reasonOf, [...machineFaults])))
    .orderBy(desc(tasks.finishedAt))
    .limit(SHOWN_FAULTS);
}

/** How many failed through machine or program, by reason, whatever their age. */
export function machineFailureCounts() {
  return db
    .select({ reason: reasonOf, tasks: count() })
    .from(tasks)
    .where(and(eq(tasks.state, 'failed'), inArray(reasonOf, [...machineFaults])))
    .groupBy(reasonOf)
    .orderBy(asc(reasonOf));
}

/** Webhooks to which nothing gets through: the team, the host, since when, and the last reason. */
export async function failingWebhooks() {
  const last = db
    .selectDistinctOn([webhookDeliveries.webhookId], {
      webhookId: webhookDeliveries.webhookId,
      reason: webhookDeliveries.reason,
    })
    .from(webhookDeliveries)
    .where(isNotNull(webhookDeliveries.attemptedAt))
    .orderBy(webhookDeliveries.webhookId, desc(webhookDeliveries.attemptedAt))
    .as('last');
  const rows = await db
    .select({
      id: webhooks.id,
      team: teams.name,
      url: webhooks.url,
      failingSince: webhooks.failingSince,
      givenUpAt: webhooks.givenUpAt,
      reason: last.reason,
    })
    .from(webhooks)
    .innerJoin(teams, eq(teams.id, webhooks.teamId))
    .leftJoin(last, eq(last.webhookId, webhooks.id))
    .where(isNotNull(webhooks.failingSince))
    .orderBy(asc(webhooks.failingSince));
  // Only the host: the rest of an address often carries a secret of its receiver.
  return rows.map(({ url, ...row }) => ({ ...row, host: new URL(url).host }));
}
