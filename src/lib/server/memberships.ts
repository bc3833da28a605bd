/** Who belongs to a team, and in which role. A team always keeps a lead. */
import { and, asc, desc, eq } from 'drizzle-orm';
import type { Role } from '../domain/roles';
import { db, type Executor } from './db';
import { memberships, teams, users } from './db/schema';
import { recordEvent } from './events';
import { memberRemovedLetter } from './letters';
import { postWithin } from './mail';
import { notFound, require, type Member } from './member';

/** Who opens a team. */
type Person = Pick<Member, 'userId' | 'address'>;

/** What came of a change: 'last lead' when it would have left the team without one. */
export type MembershipChange = 'done' | 'last lead';

/** The members of the asking member's team, the most trusted first. */
export function listMembers(member: Member) {
  return db
    .select({
      id: users.id,
      name: users.name,
      email: users.email,
      role: memberships.role,
      since: memberships.createdAt,
    })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.teamId, member.teamId))
    .orderBy(desc(memberships.role), asc(users.name));
}

/** Whom letters about a team go to. */
export function leadsOf(executor: Executor, teamId: string) {
  return executor
    .select({ id: users.id, name: users.name, email: users.email })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(memberships.teamId, teamId), eq(memberships.role, 'lead')))
    .orderBy(asc(users.name));
}

/** The team's memberships, locked so that two changes at once cannot take the last two leads. */
function lockMemberships(executor: Executor, teamId: string) {
  return executor
    .select({ userId: memberships.userId, role: memberships.role })
    .from(memberships)
    .where(eq(memberships.teamId, teamId))
    .orderBy(asc(memberships.userId))
    .for('update');
}

/**
 * Carries out a change of one member's role, null for leaving, unless it takes the team's last lead; `then` happens in
 * the same transaction.
 */
async function change(
  member: Member,
  userId: string,
  role: Role | null,
  action: string,
  then?: (executor: Executor) => Promise<void>,
): Promise<MembershipChange> {
  return db.transaction(async (tx) => {
    const all = await lockMemberships(tx, member.teamId);
    const present = all.find((one) => one.userId === userId);
    if (!present) notFound('member');
    const leads = all.filter((one) => one.role === 'lead');
    if (present.role === 'lead' && role !== 'lead' && leads.length === 1) return 'last lead';
    const isTheirs = and(eq(memberships.teamId, member.teamId), eq(memberships.userId, userId));
    if (role === null) await tx.delete(memberships).where(isTheirs);
    else await tx.update(memberships).set({ role }).where(isTheirs);
    await recordEvent(tx, member, action, `user:${userId}`, { from: present.role, to: role });
    await then?.(tx);
    return 'done';
  });
}

/** Gives a member another role. */
export async function changeRole(
  member: Member,
  userId: string,
  role: Role,
): Promise<MembershipChange> {
  require(member, 'manage members');
  return change(member, userId, role, 'change role');
}

/** Takes a member out of the team and tells them by letter. */
export async function remove(member: Member, userId: string): Promise<MembershipChange> {
  require(member, 'manage members');
  return change(member, userId, null, 'remove member', async (tx) => {
    const [found] = await tx
      .select({ name: users.name, email: users.email, team: teams.name })
      .from(users)
      .innerJoin(teams, eq(teams.id, member.teamId))
      .where(eq(users.id, userId));
    await postWithin(tx, found!.email, memberRemovedLetter(found!.name, found!.team));
  });
}

/** Ends the asking member's own membership. */
export function leave(member: Member): Promise<MembershipChange> {
  return change(member, member.userId, null, 'leave team');
}

/** Makes another member a lead and the asking lead a modeler, in one step. */
export async function handOver(member: Member, userId: string): Promise<void> {
  require(member, 'manage members');
  await db.transaction(async (tx) => {
    const all = await lockMemberships(tx, member.teamId);
    if (userId === member.userId || !all.some((one) => one.userId === userId)) notFound('member');
    const roleOf = (id: string, role: Role) =>
      tx
        .update(memberships)
        .set({ role })
        .where(and(eq(memberships.teamId, member.teamId), eq(memberships.userId, id)));
    await roleOf(userId, 'lead');
    await roleOf(member.userId, 'modeler');
    await recordEvent(tx, member, 'hand over', `user:${userId}`);
  });
}

/** Opens a further team, which the person leads; answers its id. */
export function openTeam(person: Person, name: string): Promise<string> {
  return db.transaction((tx) => openTeamWithin(tx, person, name));
}

/** As `openTeam`, as a part of the caller's transaction. */
export async function openTeamWithin(
  executor: Executor,
  person: Person,
  name: string,
): Promise<string> {
  const [team] = await executor.insert(teams).values({ name }).returning({ id: teams.id });
  const teamId = team!.id;
  await executor.insert(memberships).values({ teamId, userId: person.userId, role: 'lead' });
  await recordEvent(executor, { ...person, teamId }, 'open team', `team:${teamId}`);
  return teamId;
}

/** Gives the team another name. */
export async function renameTeam(member: Member, name: string): Promise<void> {
  require(member, 'manage members');
  await db.transaction(async (tx) => {
    const [old] = await tx
      .select({ name: teams.name })
      .from(teams)
      .where(eq(teams.id, member.teamId));
    await tx.update(teams).set({ name }).where(eq(teams.id, member.teamId));
    await recordEvent(tx, member, 'rename team', `team:${member.teamId}`, {
      from: old!.name,
      to: name,
    });
  });
}
