/** What a person finds on their desk: what they have going, what finished lately, and what needs them. */
import { and, count, desc, eq, gt, inArray, isNull, sql } from 'drizzle-orm';
import { may } from '../domain/roles';
import * as batches from './batches';
import { db } from './db';
import * as tables from './db/schema';
import { headlinesOf } from './headlines';
import type { Member } from './member';

const SHOWN_BATCHES = 5;
const SHOWN_ANSWERS = 6;
const SHOWN_DRAFTS = 5;
/** Finished tasks are looked for in this many batches, the newest of each this many. */
const SEARCHED_BATCHES = 10;
const SEARCHED_TASKS = 40;
/** Trouble is looked for in this many batches. */
const TROUBLED_BATCHES = 30;
/** Older trouble has been lived with. */
const TROUBLE_AGE = sql`now() - interval '30 days'`;

/** The desk of a member. Whoever has submitted nothing reads what the team has. */
export async function load(member: Member) {
  const maySubmit = may(member.role, 'submit molecules');
  const [own, team, drafts, troubles] = await Promise.all([
    maySubmit ? batches.list(member, 1, SHOWN_BATCHES, 'own') : { total: 0, rows: [] },
    batches.list(member, 1, SHOWN_BATCHES, maySubmit ? 'others' : 'team'),
    maySubmit ? openDrafts(member) : [],
    maySubmit ? findTroubles(member) : [],
  ]);
  const whose = own.total > 0 ? 'own' : 'team';
  return {
    own,
    team,
    drafts,
    troubles,
    whose,
    answers: await latestAnswers(member, whose),
  } as const;
}

/** Drafts that the member has not submitted yet, the newest first. */
async function openDrafts(member: Member) {
  const { batches: drafts, entries } = tables;
  return db
    .select({
      id: drafts.id,
      name: drafts.name,
      createdAt: drafts.createdAt,
      rows: count(entries.id),
    })
    .from(drafts)
    .leftJoin(entries, eq(entries.batchId, drafts.id))
    .where(
      and(
        eq(drafts.teamId, member.teamId),
        eq(drafts.createdBy, member.userId),
        isNull(drafts.submittedAt),
      ),
    )
    .groupBy(drafts.id)
    .orderBy(desc(drafts.createdAt))
    .limit(SHOWN_DRAFTS);
}

/** Own batches of late in which something failed, could not be read, or was read with a warning. */
async function findTroubles(member: Member) {
  const { batches: submitted, entries, tasks } = tables;
  const recent = await db
    .select({ id: submitted.id, name: submitted.name })
    .from(submitted)
    .where(and(batches.submittedBy(member, 'own'), gt(submitted.submittedAt, TROUBLE_AGE)))
    .orderBy(desc(submitted.submittedAt))
    .limit(TROUBLED_BATCHES);
  const ids = recent.map(({ id }) => id);
  if (ids.length === 0) return [];
  const [failures, remarks] = await Promise.all([
    db
      .select({
        batchId: tasks.batchId,
        failed: count(),
        reason: sql<string>`min(${tasks.error}->>'message')`,
      })
      .from(tasks)
      .where(and(inArray(tasks.batchId, ids), eq(tasks.state, 'failed')))
      .groupBy(tasks.batchId),
    db
      .select({ batchId: entries.batchId, verdict: entries.verdict, rows: count() })
      .from(entries)
      .where(and(inArray(entries.batchId, ids), sql`${entries.verdict} <> 'ready'`))
      .groupBy(entries.batchId, entries.verdict),
  ]);
  return recent.flatMap(({ id, name }) => {
    const failure = failures.find(({ batchId }) => batchId === id);
    const rowsWith = (verdict: 'error' | 'warning') =>
      remarks.find((remark) => remark.batchId === id && remark.verdict === verdict)?.rows ?? 0;
    const [unreadable, warned] = [rowsWith('error'), rowsWith('warning')];
    if (!failure && unreadable + warned === 0) return [];
    const { failed, reason } = failure ?? { failed: 0, reason: null };
    return [{ id, name, failed, reason, unreadable, warned }];
  });
}

/** The molecules that were finished last, each with the first sentence of its answer. */
async function latestAnswers(member: Member, whose: batches.Whose) {
  const { batches: submitted, entries, tasks } = tables;
  const recent = db
    .select({ id: submitted.id, name: submitted.name })
    .from(submitted)
    .where(batches.submittedBy(member, whose))
    .orderBy(desc(submitted.submittedAt))
    .limit(SEARCHED_BATCHES)
    .as('recent');
  const ended = db
    .select({ entryId: tasks.entryId, finishedAt: tasks.finishedAt })
    .from(tasks)
    .where(and(eq(tasks.batchId, recent.id), eq(tasks.state, 'done')))
    .orderBy(desc(tasks.finishedAt))
    .limit(SEARCHED_TASKS)
    .as('ended');
  const newest = db
    .select({
      entryId: ended.entryId,
      finishedAt: ended.finishedAt,
      batchId: recent.id,
      batchName: recent.name,
    })
    .from(recent)
    .crossJoinLateral(ended)
    .orderBy(desc(ended.finishedAt))
    .limit(SEARCHED_TASKS)
    .as('newest');
  const found = await db
    .select({
      moleculeId: sql<string>`${entries.moleculeId}`,
      name: entries.name,
      batchId: newest.batchId,
      batchName: newest.batchName,
      finishedAt: sql<Date>`${newest.finishedAt}`.mapWith(tasks.createdAt),
    })
    .from(newest)
    .innerJoin(entries, eq(entries.id, newest.entryId))
    .orderBy(desc(newest.finishedAt));
  const latest = found.filter(
    ({ moleculeId }, n) => found.findIndex((other) => other.moleculeId === moleculeId) === n,
  );
  const shown = latest.slice(0, SHOWN_ANSWERS);
  const sentences = await headlinesOf(
    member,
    shown.map(({ moleculeId }) => moleculeId),
  );
  return shown.map((row) => ({ ...row, sentence: sentences.get(row.moleculeId) ?? null }));
}
