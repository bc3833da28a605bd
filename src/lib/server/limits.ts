/** What teams and members may use up, checked within the transaction that would use it up. */
import { and, asc, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm';
import {
  grouped,
  limitsWithin,
  type LimitName,
  type LimitSettings,
  type Limits,
  type Room,
} from '../domain/limits';
import { db, type Executor } from './db';
import { batches, memberships, tasks, teams, users } from './db/schema';
import { environment } from './environment';
import type { Member } from './member';
import { LimitError } from './refusals';
import { MEGABYTE, storedBytes } from './storage';

/** What a team has until a lead sets something else. */
export const defaultLimits: Limits = {
  queuedTasks: environment.WINDLASS_TEAM_QUEUED_TASKS,
  atoms: environment.WINDLASS_TEAM_ATOMS,
  megabytes: environment.WINDLASS_TEAM_MEGABYTES,
  months: environment.WINDLASS_TEAM_MONTHS,
};

/** The most that leads may set. */
export const ceilings: Limits = {
  queuedTasks: environment.WINDLASS_TEAM_QUEUED_TASKS_CEILING,
  atoms: environment.WINDLASS_TEAM_ATOMS_CEILING,
  megabytes: environment.WINDLASS_TEAM_MEGABYTES_CEILING,
  months: environment.WINDLASS_TEAM_MONTHS_CEILING,
};

/** The limits of a team by what its leads set. */
export function teamLimitsFrom(set: LimitSettings): Limits {
  return limitsWithin(ceilings, { ...defaultLimits, ...set });
}

/**
 * Locks a team until the transaction ends, against others that lock it too: submissions, changes of limits, removals.
 * Rows that only refer to the team are written meanwhile.
 */
export async function lockTeam(executor: Executor, teamId: string): Promise<void> {
  await executor
    .select({ id: teams.id })
    .from(teams)
    .where(eq(teams.id, teamId))
    .for('no key update');
}

/** The limits in force for a team and, within them, for one of its members. */
export async function limitsOf({ teamId, userId }: Member, executor: Executor = db) {
  const [set] = await executor
    .select({ team: teams.limits, own: memberships.limits })
    .from(teams)
    .leftJoin(memberships, and(eq(memberships.teamId, teams.id), eq(memberships.userId, userId)))
    .where(eq(teams.id, teamId));
  const team = teamLimitsFrom(set?.team ?? {});
  return { team, own: limitsWithin(team, set?.own ?? {}) };
}

/** How many of a team's tasks are queued or running, those of one member where they are named. */
export async function openTasks(
  executor: Executor,
  teamId: string,
  userId?: string,
): Promise<number> {
  const [{ open }] = await executor
    .select({ open: sql<number>`count(*)::int` })
    .from(batches)
    .innerJoin(tasks, eq(tasks.batchId, batches.id))
    .where(
      and(
        eq(batches.teamId, teamId),
        isNotNull(batches.submittedAt),
        isNull(batches.finishedAt),
        userId ? eq(batches.createdBy, userId) : undefined,
        inArray(tasks.state, ['queued', 'running']),
      ),
    );
  return open;
}

/** What the team and the member in it use at the moment. */
export async function usageOf(executor: Executor, { teamId, userId }: Member) {
  const [team, own] = [
    await openTasks(executor, teamId),
    await openTasks(executor, teamId, userId),
  ];
  return {
    queuedTasks: { team, own },
    megabytes: {
      team: (await storedBytes(teamId, null, executor)) / MEGABYTE,
      own: (await storedBytes(teamId, userId, executor)) / MEGABYTE,
    },
  };
}

/** What a member can still use up. */
export async function roomOf(member: Member): Promise<Room> {
  const { team, own } = await limitsOf(member);
  const usage = await usageOf(db, member);
  const left = (name: 'queuedTasks' | 'megabytes') =>
    Math.max(0, Math.min(team[name] - usage[name].team, own[name] - usage[name].own));
  return { limits: own, left: { queuedTasks: left('queuedTasks'), megabytes: left('megabytes') } };
}

/** Who can raise a limit, as the end of a sentence. */
async function whoRaises(
  executor: Executor,
  { teamId }: Member,
  whose: 'team' | 'own',
  isAtCeiling: boolean,
): Promise<string> {
  if (whose === 'team' && isAtCeiling) return 'only the operator of this Windlass can raise it';
  const leads = await executor
    .select({ name: users.name })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(memberships.teamId, teamId), eq(memberships.role, 'lead')))
    .orderBy(asc(users.name))
    .limit(3);
  return `a lead of the team can raise it (${leads.map(({ name }) => name).join(', ')})`;
}

/** Throws for molecules that are larger than the member may submit. */
export async function checkAtoms(
  executor: Executor,
  member: Member,
  rows: readonly { readonly name: string; readonly atomCount: number }[],
): Promise<void> {
  const { team, own } = await limitsOf(member, executor);
  const large = rows
    .filter(({ atomCount }) => atomCount > own.atoms)
    .sort((a, b) => b.atomCount - a.atomCount);
  if (large.length === 0) return;
  const whose = own.atoms < team.atoms ? 'own' : 'team';
  const raises = await whoRaises(executor, member, whose, team.atoms >= ceilings.atoms);
  const [{ name, atomCount }] = large;
  const have = large.length === 1 ? '1 molecule has' : `${large.length} molecules have`;
  throw new LimitError(
    'atoms',
    `${have} more than ${own.atoms} atoms, the most in ${whose === 'own' ? 'what you submit' : 'this team'} (the largest is ${name} with ${atomCount}). Leave out what is larger; ${raises}.`,
  );
}

/**
 * Throws where tasks that were just queued are more than the team or the member may have, or the storage is full. The
 * team is locked by the caller before it looks at anything.
 */
export async function checkRoom(executor: Executor, member: Member, queued: number): Promise<void> {
  const { team, own } = await limitsOf(member, executor);
  const usage = await usageOf(executor, member);
  for (const whose of ['team', 'own'] as const) {
    const limits = whose === 'team' ? team : own;
    // A member's limit that is the team's needs no sentence of its own.
    const raises = (name: LimitName) =>
      whoRaises(executor, member, whose, team[name] >= ceilings[name]);
    const subject = whose === 'team' ? 'the team' : 'you';
    if (usage.queuedTasks[whose] > limits.queuedTasks) {
      const left = Math.max(0, limits.queuedTasks - (usage.queuedTasks[whose] - queued));
      throw new LimitError(
        'queuedTasks',
        `This would queue ${grouped(queued)} ${queued === 1 ? 'task' : 'tasks'}, but ${subject} may have ${grouped(limits.queuedTasks)} queued or running at once, and ${grouped(left)} ${left === 1 ? 'is' : 'are'} left. Submit fewer, or wait until others have ended; ${await raises('queuedTasks')}.`,
      );
    }
    if (usage.megabytes[whose] >= limits.megabytes) {
      throw new LimitError(
        'megabytes',
        `The storage is full: ${subject} may store ${grouped(limits.megabytes)} MB of results, and ${grouped(usage.megabytes[whose])} MB are stored, so 0 MB are left. Nothing new is computed until results are removed or the limit is raised; ${await raises('megabytes')}.`,
      );
    }
  }
}
