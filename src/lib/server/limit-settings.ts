/** What leads set for their team and its members. */
import { and, asc, eq } from 'drizzle-orm';
import type { LimitSettings } from '../domain/limits';
import { db } from './db';
import { memberships, teams, users } from './db/schema';
import { recordEvent } from './events';
import {
  ceilings,
  defaultLimits,
  lockTeam,
  openTasks,
  roomOf,
  teamLimitsFrom,
  usageOf,
} from './limits';
import { notFound, require, type Member } from './member';
import { MEGABYTE, storedBytes } from './storage';

/** The limits of a team and what it uses; with those of its members for a lead. */
export async function loadLimits(member: Member) {
  const [set] = await db
    .select({ team: teams.limits })
    .from(teams)
    .where(eq(teams.id, member.teamId));
  const limits = teamLimitsFrom(set?.team ?? {});
  const usage = await usageOf(db, member);
  return {
    set: set?.team ?? {},
    limits,
    defaults: defaultLimits,
    ceilings,
    used: { queuedTasks: usage.queuedTasks.team, megabytes: usage.megabytes.team },
    room: await roomOf(member),
    members: member.role === 'lead' ? await membersWithLimits(member) : [],
  };
}

async function membersWithLimits(member: Member) {
  require(member, 'manage limits');
  const rows = await db
    .select({ id: users.id, name: users.name, set: memberships.limits })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.teamId, member.teamId))
    .orderBy(asc(users.name));
  return Promise.all(
    rows.map(async (row) => ({
      ...row,
      used: {
        queuedTasks: await openTasks(db, member.teamId, row.id),
        megabytes: (await storedBytes(member.teamId, row.id)) / MEGABYTE,
      },
    })),
  );
}

/** Sets the team's limits; what is left out is the operator's default again. */
export async function setTeamLimits(member: Member, limits: LimitSettings): Promise<void> {
  require(member, 'manage limits');
  await db.transaction(async (transaction) => {
    await lockTeam(transaction, member.teamId);
    await transaction.update(teams).set({ limits }).where(eq(teams.id, member.teamId));
    await recordEvent(transaction, member, 'change limits', `team:${member.teamId}`, { ...limits });
  });
}

/** Sets one member's limits, none above the team's; what is left out is the team's again. */
export async function setMemberLimits(
  member: Member,
  userId: string,
  limits: LimitSettings,
): Promise<void> {
  require(member, 'manage limits');
  await db.transaction(async (transaction) => {
    await lockTeam(transaction, member.teamId);
    const changed = await transaction
      .update(memberships)
      .set({ limits })
      .where(and(eq(memberships.teamId, member.teamId), eq(memberships.userId, userId)))
      .returning({ userId: memberships.userId });
    if (changed.length === 0) notFound('member');
    await recordEvent(transaction, member, 'change limits', `user:${userId}`, { ...limits });
  });
}
