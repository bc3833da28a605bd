/** Invitations to a team: sent by a lead, bound to an address, good once and for a while. */
import { and, desc, eq, gt, isNull, lt, sql } from 'drizzle-orm';
import type { Role } from '../domain/roles';
import { db, type Executor } from './db';
import { invitations, memberships, teams, users } from './db/schema';
import { recordEvent } from './events';
import { INVITATION_DAYS, invitationLetter } from './letters';
import { postWithin } from './mail';
import { require, type Member } from './member';
import { hashSecret, makeSecret } from './secrets';

/** An invitation as the person who holds its letter sees it. */
export interface Invitation {
  readonly id: string;
  readonly teamId: string;
  readonly teamName: string;
  readonly email: string;
  readonly role: Role;
  readonly invitedBy: string | null;
}

const isOpen = and(isNull(invitations.acceptedAt), gt(invitations.expiresAt, sql`now()`));

async function isMember(teamId: string, email: string): Promise<boolean> {
  const [found] = await db
    .select({ id: users.id })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(memberships.teamId, teamId), eq(users.email, email)));
  return found !== undefined;
}

/**
 * Invites an address and sends the letter; an earlier open invitation of the same address stops working.
 * @returns false when the address belongs to a member already
 */
export async function invite(
  member: Member,
  given: { readonly email: string; readonly role: Role },
): Promise<boolean> {
  require(member, 'manage members');
  if (await isMember(member.teamId, given.email)) return false;
  const secret = makeSecret();
  await db.transaction(async (tx) => {
    await forgetOpen(tx, member.teamId, given.email);
    await tx.insert(invitations).values({
      ...given,
      teamId: member.teamId,
      tokenHash: hashSecret(secret),
      invitedBy: member.userId,
      expiresAt: sql`now() + make_interval(days => ${INVITATION_DAYS})`,
    });
    await recordEvent(tx, member, 'invite', `address:${given.email}`, { role: given.role });
    const [found] = await tx
      .select({ team: teams.name, lead: users.name })
      .from(teams)
      .innerJoin(users, eq(users.id, member.userId))
      .where(eq(teams.id, member.teamId));
    const letter = invitationLetter({ ...found!, role: given.role, token: secret });
    await postWithin(tx, given.email, letter);
  });
  return true;
}

async function forgetOpen(executor: Executor, teamId: string, email: string): Promise<void> {
  await executor
    .delete(invitations)
    .where(
      and(
        eq(invitations.teamId, teamId),
        eq(invitations.email, email),
        isNull(invitations.acceptedAt),
      ),
    );
}

/** The team's invitations that nobody has taken yet, the newest first. */
export function listOpen(member: Member) {
  require(member, 'manage members');
  return db
    .select({
      id: invitations.id,
      email: invitations.email,
      role: invitations.role,
      createdAt: invitations.createdAt,
      expiresAt: invitations.expiresAt,
    })
    .from(invitations)
    .where(and(eq(invitations.teamId, member.teamId), isOpen))
    .orderBy(desc(invitations.createdAt));
}

/** Takes an invitation back; false when it is not an open one of the team. */
export async function withdraw(member: Member, invitationId: string): Promise<boolean> {
  require(member, 'manage members');
  return db.transaction(async (tx) => {
    const [withdrawn] = await tx
      .delete(invitations)
      .where(and(eq(invitations.id, invitationId), eq(invitations.teamId, member.teamId), isOpen))
      .returning({ email: invitations.email });
    if (!withdrawn) return false;
    await recordEvent(tx, member, 'withdraw invitation', `address:${withdrawn.email}`);
    return true;
  });
}

/** The open invitation of a letter's secret, without using it up; null when it does not work (any more). */
export async function find(secret: string): Promise<Invitation | null> {
  const [found] = await db
    .select({
      id: invitations.id,
      teamId: invitations.teamId,
      teamName: teams.name,
      email: invitations.email,
      role: invitations.role,
      invitedBy: users.name,
    })
    .from(invitations)
    .innerJoin(teams, eq(teams.id, invitations.teamId))
    .leftJoin(users, eq(users.id, invitations.invitedBy))
    .where(and(eq(invitations.tokenHash, hashSecret(secret)), isOpen));
  return found ?? null;
}

interface Invited {
  readonly userId: string;
  readonly email: string;
  readonly address?: string;
}

/** Uses an invitation up and makes the person a member; answers the team, or null when it does not work for them. */
export function accept(person: Invited, secret: string): Promise<string | null> {
  return db.transaction((tx) => take(tx, person, secret));
}

/** As `accept`, as a part of the caller's transaction; of two that try at once only one succeeds. */
export async function take(
  executor: Executor,
  person: Invited,
  secret: string,
): Promise<string | null> {
  const [taken] = await executor
    .update(invitations)
    .set({ acceptedAt: sql`now()` })
    .where(
      and(
        eq(invitations.tokenHash, hashSecret(secret)),
        eq(invitations.email, person.email),
        isOpen,
      ),
    )
    .returning({ teamId: invitations.teamId, role: invitations.role });
  if (!taken) return null;
  const { teamId, role } = taken;
  await executor
    .insert(memberships)
    .values({ teamId, role, userId: person.userId })
    .onConflictDoNothing();
  await recordEvent(executor, { ...person, teamId }, 'join team', `user:${person.userId}`, {
    role,
  });
  return teamId;
}

/** Forgets invitations that stopped working a while ago. */
export async function forgetExpired(): Promise<void> {
  await db.delete(invitations).where(lt(invitations.expiresAt, sql`now() - interval '30 days'`));
}
