/**
 * Results older than their team's months are removed: announced by letter at least 14 days before, looked at again when
 * the day has come, and never where a pinned or a younger batch uses them. A batch's age counts from its last end. Rows
 * stay listed and can be run again.
 */
import { and, asc, eq, gt, inArray, isNotNull, isNull, lte, sql } from 'drizzle-orm';
import { db, type Executor } from './db';
import { batches, memberships, results, tasks, teams, users } from './db/schema';
import { recordEvent } from './events';
import { wasDelivered } from './letter-delivery';
import { lockTeam, teamLimitsFrom } from './limits';
import { postWithin } from './mail';
import { leadsOf } from './memberships';
import { removalLetter } from './retention-letters';

/** Days between the letter and the removal. */
export const NOTICE_DAYS = 14;
/** What comes due within so many days of an announcement waits for the next one, so that letters stay few. */
const PAUSE_DAYS = 7;
/** Batches handled in one transaction. */
const AT_ONCE = 200;

/** Announces and removes what is due in every team; any number of processes may do it. */
export async function keepRetention(now = new Date()): Promise<void> {
  const withResults = await db.select({ id: teams.id }).from(teams).orderBy(asc(teams.id));
  for (const { id } of withResults) {
    await withdraw(id, now);
    await removeDue(id, now);
    await announce(id, now);
  }
}

/** The months that count for each batch of a team, as SQL over batches joined with the maker's membership. */
async function monthsOf(executor: Executor, teamId: string) {
  const [team] = await executor
    .select({ set: teams.limits })
    .from(teams)
    .where(eq(teams.id, teamId));
  const { months } = teamLimitsFrom(team?.set ?? {});
  return sql`least(${months}::int, coalesce((select (m.limits->>'months')::int from ${memberships} m where m.team_id = "batches"."team_id" and m.user_id = "batches"."created_by"), ${months}::int))`;
}

/** When the results of a batch have reached their age. */
async function dueAt(executor: Executor, teamId: string) {
  return sql`"batches"."finished_at" + make_interval(months => ${await monthsOf(executor, teamId)})`;
}

const mayGo = (teamId: string) =>
  and(
    eq(batches.teamId, teamId),
    isNotNull(batches.finishedAt),
    isNull(batches.removedAt),
    isNull(batches.pinnedAt),
  );

/** Takes announcements back where the limit was raised, or the batch was run again, since. */
async function withdraw(teamId: string, now: Date): Promise<void> {
  await db
    .update(batches)
    .set({ removalAt: null })
    .where(
      and(
        mayGo(teamId),
        isNotNull(batches.removalAt),
        gt(await dueAt(db, teamId), sql`greatest(${at(now)}, "batches"."removal_at")`),
      ),
    );
}

const at = (moment: Date) => sql`${moment.toISOString()}::timestamptz`;
const about = (teamId: string, removal: Date) => `removal:${teamId}:${removal.toISOString()}`;

/** Tells leads, and makers who are still members, what will go; the day is written down with the letters. */
async function announce(teamId: string, now: Date): Promise<void> {
  await db.transaction(async (transaction) => {
    await lockTeam(transaction, teamId);
    const [{ latest }] = await transaction
      .select({ latest: sql<string | null>`max(${batches.removalAt})` })
      .from(batches)
      .where(mayGo(teamId));
    const removal = new Date(now.getTime() + NOTICE_DAYS * 86_400_000);
    const quietUntil = removal.getTime() - PAUSE_DAYS * 86_400_000;
    if (latest !== null && new Date(latest).getTime() > quietUntil) return;
    const due = await transaction
      .select({ id: batches.id, name: batches.name, userId: batches.createdBy })
      .from(batches)
      .where(
        and(
          mayGo(teamId),
          isNull(batches.removalAt),
          lte(await dueAt(transaction, teamId), at(removal)),
          sql`exists (select 1 from ${tasks} where ${tasks.batchId} = "batches"."id" and ${tasks.resultId} is not null)`,
        ),
      )
      .orderBy(asc(batches.finishedAt))
      .limit(AT_ONCE);
    if (due.length === 0) return;
    await transaction
      .update(batches)
      .set({ removalAt: removal })
      .where(
        inArray(
          batches.id,
          due.map(({ id }) => id),
        ),
      );
    const [team] = await transaction
      .select({ name: teams.name })
      .from(teams)
      .where(eq(teams.id, teamId));
    for (const person of await peopleToTell(transaction, teamId, due)) {
      const own = person.isLead ? due : due.filter(({ userId }) => userId === person.id);
      const letter = removalLetter({ person, team: team.name, batches: own, removal });
      await postWithin(transaction, person.email, letter, about(teamId, removal));
    }
    await recordEvent(transaction, { teamId, userId: null }, 'announce removal', `team:${teamId}`, {
      batches: due.length,
      removal: removal.toISOString(),
    });
  });
}

async function peopleToTell(
  executor: Executor,
  teamId: string,
  due: readonly { readonly userId: string | null }[],
) {
  const leads = await leadsOf(executor, teamId);
  const makers = due.flatMap(({ userId }) => userId ?? []);
  const members = await executor
    .select({ id: users.id, name: users.name, email: users.email })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(
      and(eq(memberships.teamId, teamId), inArray(users.id, makers.length > 0 ? makers : [NOBODY])),
    );
  const isLead = ({ id }: { readonly id: string }) => leads.some((lead) => lead.id === id);
  return [
    ...leads.map((lead) => ({ ...lead, isLead: true })),
    ...members.filter((member) => !isLead(member)).map((member) => ({ ...member, isLead: false })),
  ];
}

const NOBODY = '00000000-0000-0000-0000-000000000000';

/** Removes what was announced and is still due. Where no letter arrived, nobody knew: it is announced again. */
async function removeDue(teamId: string, now: Date): Promise<void> {
  await db.transaction(async (transaction) => {
    await lockTeam(transaction, teamId);
    const due = await transaction
      .select({
        id: batches.id,
        removalAt: sql<Date>`${batches.removalAt}`.mapWith(batches.removalAt),
      })
      .from(batches)
      .where(
        and(
          mayGo(teamId),
          lte(batches.removalAt, now),
          lte(await dueAt(transaction, teamId), at(now)),
        ),
      )
      .orderBy(asc(batches.removalAt))
      .limit(AT_ONCE)
      .for('no key update');
    const days = new Map(due.map(({ removalAt }) => [about(teamId, removalAt), removalAt]));
    const told = new Set<string>();
    for (const day of days.keys()) if (await wasDelivered(day)) told.add(day);
    const [going, untold] = [true, false].map((wanted) =>
      due
        .filter(({ removalAt }) => told.has(about(teamId, removalAt)) === wanted)
        .map(({ id }) => id),
    );
    if (untold.length > 0) {
      await transaction.update(batches).set({ removalAt: null }).where(inArray(batches.id, untold));
    }
    if (going.length > 0) await remove(transaction, teamId, going);
  });
}

/** Removes the results of batches that no other batch uses any more, and says so in the batches. */
async function remove(
  executor: Executor,
  teamId: string,
  batchIds: readonly string[],
): Promise<void> {
  await executor
    .update(batches)
    .set({ removedAt: sql`now()`, removalAt: null })
    .where(inArray(batches.id, [...batchIds]));
  const removed = await executor
    .delete(results)
    .where(
      and(
        eq(results.teamId, teamId),
        sql`${results.id} in (select t.result_id from ${tasks} t where t.batch_id in ${[...batchIds]})`,
        sql`not exists (select 1 from ${tasks} t join ${batches} b on b.id = t.batch_id where t.result_id = ${results.id} and b.removed_at is null)`,
      ),
    )
    .returning({ id: results.id });
  for (const id of batchIds) {
    await recordEvent(executor, { teamId, userId: null }, 'remove results', `batch:${id}`);
  }
  await recordEvent(executor, { teamId, userId: null }, 'remove results', `team:${teamId}`, {
    batches: batchIds.length,
    results: removed.length,
  });
}
