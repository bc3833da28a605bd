/** Letters to those whose batches have ended: one for each, or one a day, as they chose. Each batch is told of once. */
import { and, asc, count, desc, eq, isNotNull, isNull, lt, sql } from 'drizzle-orm';
import { DAILY_LETTER_HOUR, type BatchLetterChoice } from '../domain/batch-letters';
import { noTasks, statesOf } from './batches';
import { db, type Executor } from './db';
import { batches, entries, tasks, teams, users } from './db/schema';
import { batchFinishedLetter, dailyLetter, type FinishedBatch } from './finish-letters';
import { headlinesOf } from './headlines';
import { postWithin } from './mail';

/** Molecules whose answers, and reasons whose failures, a letter about one batch tells. */
const TOLD_MOLECULES = 10;
const TOLD_REASONS = 5;
/** Batches seen to in one go. */
const AT_ONCE = 50;
/** The daily letter waits a little, so that what was being noted at its hour is in it. */
const DAILY_DELAY_MS = 60_000;

const isUntold = and(isNotNull(batches.finishedAt), isNull(batches.toldAt));
/** With the names written out: in what an update returns, columns lose their tables, and the two would be one. */
const isStillMember = sql<boolean>`exists (select 1 from memberships where memberships.team_id = batches.team_id and memberships.user_id = batches.created_by)`;

/** Sends the letters that are due; any number of processes may do it. */
export async function tellOfFinished(now = new Date()): Promise<void> {
  await tellEach();
  await tellDaily(lastDailyHour(now));
}

/** Remembers when a person wants letters about their batches. */
export async function chooseBatchLetters(userId: string, choice: BatchLetterChoice): Promise<void> {
  await db.update(users).set({ batchLetters: choice }).where(eq(users.id, userId));
}

/** When a person wants letters about their batches. */
export async function batchLettersOf(userId: string): Promise<BatchLetterChoice> {
  const [user] = await db
    .select({ choice: users.batchLetters })
    .from(users)
    .where(eq(users.id, userId));
  return user?.choice ?? 'off';
}

/** The latest moment at which the daily letters were due. */
function lastDailyHour(now: Date): Date {
  const settled = new Date(now.getTime() - DAILY_DELAY_MS);
  const hour = new Date(settled);
  hour.setUTCHours(DAILY_LETTER_HOUR, 0, 0, 0);
  if (hour > settled) hour.setUTCDate(hour.getUTCDate() - 1);
  return hour;
}

async function tellEach(): Promise<void> {
  const waiting = await db
    .select({ id: batches.id })
    .from(batches)
    .leftJoin(users, eq(users.id, batches.createdBy))
    .where(and(isUntold, sql`${users.batchLetters} is distinct from 'daily'`))
    .orderBy(asc(batches.finishedAt))
    .limit(AT_ONCE);
  for (const { id } of waiting) {
    await db.transaction(async (transaction) => {
      const [told] = await markTold(transaction, eq(batches.id, id));
      if (!told?.isMember || told.userId === null) return;
      const [person] = await transaction
        .select({ name: users.name, email: users.email, choice: users.batchLetters })
        .from(users)
        .where(eq(users.id, told.userId));
      if (person?.choice !== 'each') return;
      await postWithin(
        transaction,
        person.email,
        batchFinishedLetter(person, await describe(told)),
      );
    });
  }
}

/** Marks batches as told of; of two that try at once only one gets each of them. */
function markTold(executor: Executor, which: ReturnType<typeof and>) {
  return executor
    .update(batches)
    .set({ toldAt: sql`now()` })
    .where(and(which, isUntold))
    .returning({
      id: batches.id,
      name: batches.name,
      teamId: batches.teamId,
      userId: batches.createdBy,
      isMember: isStillMember,
    });
}
type Told = Awaited<ReturnType<typeof markTold>>[number];

async function tellDaily(until: Date): Promise<void> {
  const due = and(isUntold, lt(batches.finishedAt, until));
  const people = await db
    .selectDistinct({ id: users.id })
    .from(batches)
    .innerJoin(users, eq(users.id, batches.createdBy))
    .where(and(due, eq(users.batchLetters, 'daily')))
    .limit(AT_ONCE);
  for (const { id } of people) {
    await db.transaction(async (transaction) => {
      const [person] = await transaction
        .select({ name: users.name, email: users.email, choice: users.batchLetters })
        .from(users)
        .where(eq(users.id, id))
        .for('no key update');
      if (person?.choice !== 'daily') return;
      const told = await markTold(
        transaction,
        and(eq(batches.createdBy, id), lt(batches.finishedAt, until)),
      );
      const own = told.filter(({ isMember }) => isMember);
      if (own.length === 0) return;
      const states = await statesOf(own.map((batch) => batch.id));
      const summed = await Promise.all(
        own.map(async (batch) => ({
          name: batch.name,
          team: await teamName(batch.teamId),
          counts: states.get(batch.id) ?? noTasks,
        })),
      );
      await postWithin(transaction, person.email, dailyLetter(person, summed));
    });
  }
}

async function teamName(teamId: string): Promise<string> {
  const [team] = await db.select({ name: teams.name }).from(teams).where(eq(teams.id, teamId));
  return team?.name ?? '';
}

/** What a letter tells of a batch. */
async function describe(batch: Told): Promise<FinishedBatch> {
  const states = await statesOf([batch.id]);
  const [{ unreadable }] = await db
    .select({ unreadable: count() })
    .from(entries)
    .where(and(eq(entries.batchId, batch.id), eq(entries.verdict, 'error')));
  return {
    id: batch.id,
    name: batch.name,
    team: await teamName(batch.teamId),
    counts: states.get(batch.id) ?? noTasks,
    unreadable,
    failures: await failuresOf(batch.id),
    ...(await answersOf(batch)),
  };
}

/** Why tasks of a batch failed, the most frequent reason first, each with some of the molecules. */
function failuresOf(batchId: string) {
  const reason = sql<string>`${tasks.error}->>'message'`;
  return db
    .select({
      reason,
      tasks: count(),
      names: sql<number>`count(distinct ${entries.name})::int`,
      molecules: sql<string[]>`(array_agg(distinct ${entries.name} order by ${entries.name}))[1:3]`,
    })
    .from(tasks)
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .where(and(eq(tasks.batchId, batchId), eq(tasks.state, 'failed')))
    .groupBy(reason)
    .orderBy(desc(count()), asc(reason))
    .limit(TOLD_REASONS);
}

/** The answers of a batch's first molecules in a sentence each, and how many more there are. */
async function answersOf({ id, teamId }: Told) {
  const answered = and(
    eq(entries.batchId, id),
    isNotNull(entries.moleculeId),
    sql`exists (select 1 from ${tasks} where ${tasks.entryId} = ${entries.id} and ${tasks.resultId} is not null)`,
  );
  const rows = await db
    .select({ name: entries.name, moleculeId: sql<string>`${entries.moleculeId}` })
    .from(entries)
    .where(answered)
    .orderBy(asc(entries.position))
    .limit(TOLD_MOLECULES);
  const total = await db.$count(entries, answered);
  const sentences = await headlinesOf(
    { teamId },
    rows.map(({ moleculeId }) => moleculeId),
  );
  const answers = rows.flatMap(({ name, moleculeId }) => {
    const sentence = sentences.get(moleculeId);
    return sentence === undefined ? [] : [{ name, sentence }];
  });
  return { answers, further: total - rows.length };
}
