/** Tells leads when their team's storage is nearly full, once each time it comes to that. */
import { eq, isNull, and, isNotNull, sql } from 'drizzle-orm';
import { grouped } from '../domain/limits';
import { db } from './db';
import { results, teams } from './db/schema';
import { compose } from './letters';
import { teamLimitsFrom } from './limits';
import { postWithin, type Letter } from './mail';
import { leadsOf } from './memberships';
import { MEGABYTE, storedBytes } from './storage';

/** Nearly full from this share on. */
const NEAR = 0.9;

/** Looks at every team that stores anything, or was warned before. */
export async function warnOfStorage(): Promise<void> {
  const stored = db
    .select({ teamId: results.teamId })
    .from(results)
    .where(eq(results.teamId, teams.id));
  const known = await db
    .select({ id: teams.id, set: teams.limits, warnedAt: teams.storageWarnedAt })
    .from(teams)
    .where(sql`exists ${stored} or ${isNotNull(teams.storageWarnedAt)}`);
  for (const { id, set, warnedAt } of known) {
    const { megabytes } = teamLimitsFrom(set);
    const used = (await storedBytes(id)) / MEGABYTE;
    const isNear = used >= NEAR * megabytes;
    if (isNear && warnedAt === null) await warn(id, used, megabytes);
    if (!isNear && warnedAt !== null) {
      await db.update(teams).set({ storageWarnedAt: null }).where(eq(teams.id, id));
    }
  }
}

/** Marks the team as warned and writes to its leads, in one transaction; of two that try only one does. */
async function warn(teamId: string, used: number, megabytes: number): Promise<void> {
  await db.transaction(async (transaction) => {
    const [team] = await transaction
      .update(teams)
      .set({ storageWarnedAt: sql`now()` })
      .where(and(eq(teams.id, teamId), isNull(teams.storageWarnedAt)))
      .returning({ name: teams.name });
    if (!team) return;
    for (const lead of await leadsOf(transaction, teamId)) {
      await postWithin(
        transaction,
        lead.email,
        nearlyFullLetter(lead.name, team.name, used, megabytes),
      );
    }
  });
}

function nearlyFullLetter(name: string, team: string, used: number, megabytes: number): Letter {
  const share = Math.floor((100 * used) / megabytes);
  return compose({
    subject: `${team} has used ${share} % of its storage`,
    greeting: `Hello ${name},`,
    lines: [
      `The results of ${team} take ${grouped(used)} of the ${grouped(megabytes)} MB that the team may store. When it is full, nothing new is computed.`,
      'You can raise the limit as far as the operator allows, or let results go after fewer months.',
    ],
    link: { label: 'Look at the limits', path: '/team/limits' },
    closing: 'This letter comes once each time the storage fills up.',
  });
}
