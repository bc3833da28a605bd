/**
 * The end of a team: asked for by a lead, open to be undone by any lead for some days, then carried out by any process.
 * People's accounts stay.
 */
import { and, asc, eq, inArray, isNotNull, isNull, lte, sql } from 'drizzle-orm';
import { db, type Executor } from './db';
import { batches, molecules, notes, results, tasks, teams } from './db/schema';
import { recordEvent } from './events';
import { tell } from './live';
import { log } from './log';
import { lockTeam } from './limits';
import { postWithin, type Letter } from './mail';
import { require, type Member } from './member';
import { leadsOf } from './memberships';
import { dequeue } from './queue';
import { deletedLetter, deletionAskedLetter, deletionUndoneLetter } from './team-letters';

/** Days in which a deletion can be undone. */
export const DELETION_DAYS = 7;
/** Rows deleted by one statement. */
const STEP = 2_000;

export type DeletionOutcome = 'done' | 'wrong name' | 'asked already';

/** Asks for the deletion of the member's team; the name must be typed as it is. */
export async function askDeletion(member: Member, typedName: string): Promise<DeletionOutcome> {
  require(member, 'delete the team');
  return db.transaction(async (transaction) => {
    await lockTeam(transaction, member.teamId);
    const [team] = await transaction.select().from(teams).where(eq(teams.id, member.teamId));
    if (typedName.trim() !== team.name.trim()) return 'wrong name';
    if (team.deletionAt) return 'asked already';
    const [{ deletionAt }] = await transaction
      .update(teams)
      .set({ deletionAt: sql`now() + make_interval(days => ${DELETION_DAYS})` })
      .where(eq(teams.id, member.teamId))
      .returning({ deletionAt: teams.deletionAt });
    await writeToLeads(transaction, member.teamId, (name) =>
      deletionAskedLetter(name, team.name, deletionAt!),
    );
    await recordEvent(transaction, member, 'ask for deletion', `team:${member.teamId}`, {
      deletionAt: deletionAt!.toISOString(),
    });
    return 'done';
  });
}

/** Takes the deletion of the member's team back; false when none was asked for. */
export async function undoDeletion(member: Member): Promise<boolean> {
  require(member, 'delete the team');
  return db.transaction(async (transaction) => {
    await lockTeam(transaction, member.teamId);
    const [undone] = await transaction
      .update(teams)
      .set({ deletionAt: null })
      .where(and(eq(teams.id, member.teamId), isNotNull(teams.deletionAt)))
      .returning({ name: teams.name });
    if (!undone) return false;
    await writeToLeads(transaction, member.teamId, (name) =>
      deletionUndoneLetter(name, undone.name),
    );
    await recordEvent(transaction, member, 'undo deletion', `team:${member.teamId}`);
    return true;
  });
}

async function writeToLeads(
  executor: Executor,
  teamId: string,
  letterTo: (name: string) => Letter,
): Promise<void> {
  for (const { name, email } of await leadsOf(executor, teamId)) {
    await postWithin(executor, email, letterTo(name));
  }
}

/** Deletes the teams whose time to undo it is over; of processes that try at once only one deletes each. */
export async function deleteDueTeams(now = new Date()): Promise<void> {
  const due = await db.select({ id: teams.id }).from(teams).where(lte(teams.deletionAt, now));
  for (const { id } of due) {
    await deleteTeam(id, now);
    log.info({ team: id }, 'A team was deleted');
  }
}

async function deleteTeam(teamId: string, now: Date): Promise<void> {
  await db.transaction(async (transaction) => {
    // Waits for whoever still writes into the team, and keeps everybody else out.
    const [team] = await transaction
      .select({ name: teams.name })
      .from(teams)
      .where(and(eq(teams.id, teamId), lte(teams.deletionAt, now)))
      .for('update');
    if (!team) return;
    const leads = await leadsOf(transaction, teamId);
    await dropTasks(transaction, teamId);
    // In this order no deletion has to look for rows that refer to what it deletes.
    await deleteStepwise(transaction, batches, teamId);
    await deleteStepwise(transaction, notes, teamId);
    await deleteStepwise(transaction, results, teamId);
    await deleteStepwise(transaction, molecules, teamId);
    await transaction.delete(teams).where(eq(teams.id, teamId));
    for (const { name, email } of leads) {
      await postWithin(transaction, email, deletedLetter(name, team.name));
    }
  });
}

/** Takes the team's open tasks out of the queue and stops those that run. */
async function dropTasks(executor: Executor, teamId: string): Promise<void> {
  const open = await executor
    .select({ id: tasks.id, state: tasks.state })
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(
      and(
        eq(batches.teamId, teamId),
        isNull(batches.finishedAt),
        inArray(tasks.state, ['queued', 'running']),
      ),
    )
    .orderBy(asc(tasks.id));
  for (let from = 0; from < open.length; from += STEP) {
    const part = open.slice(from, from + STEP);
    await dequeue(
      executor,
      part.map(({ id }) => id),
    );
    await tell(
      executor,
      'task-cancelled',
      part.filter(({ state }) => state === 'running').map(({ id }) => id),
    );
  }
}

type OfTeam = typeof batches | typeof notes | typeof results | typeof molecules;

async function deleteStepwise(executor: Executor, table: OfTeam, teamId: string): Promise<void> {
  for (;;) {
    const gone = await executor
      .delete(table)
      .where(
        inArray(
          table.id,
          executor
            .select({ id: table.id })
            .from(table as typeof batches)
            .where(eq(table.teamId, teamId))
            .limit(STEP),
        ),
      )
      .returning({ id: table.id });
    if (gone.length === 0) return;
  }
}
