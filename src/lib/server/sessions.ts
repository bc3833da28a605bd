/** Sign-ins that have not ended. The cookie only names a row here, so ending the row ends the sign-in at once. */
import { and, asc, desc, eq, gt, isNull, lt, ne, sql } from 'drizzle-orm';
import type { EnergyUnit } from '../domain/energy-units';
import { db, type Executor } from './db';
import { memberships, sessions, teams, users } from './db/schema';
import type { Membership } from './teams';

/** A sign-in ends after this long, whatever happens. */
export const SESSION_DAYS = 30;
/** How exact the time of the last visit is kept. */
const SEEN_MINUTES = 5;
const LONGEST_USER_AGENT = 300;

/** Where a sign-in comes from, as far as it can be told. */
export interface Client {
  readonly address: string;
  readonly userAgent: string;
}

/** What a valid session tells about a request. */
export interface SignedIn {
  readonly sessionId: string;
  readonly user: {
    readonly id: string;
    readonly email: string;
    readonly name: string;
    readonly energyUnit: EnergyUnit;
  };
  readonly memberships: readonly Membership[];
}

const isOpen = and(isNull(sessions.revokedAt), gt(sessions.expiresAt, sql`now()`));

/** Begins a session and answers its id. */
export async function begin(userId: string, client: Client): Promise<string> {
  const [session] = await db
    .insert(sessions)
    .values({
      userId,
      address: client.address,
      userAgent: client.userAgent.slice(0, LONGEST_USER_AGENT),
      expiresAt: sql`now() + make_interval(days => ${SESSION_DAYS})`,
    })
    .returning({ id: sessions.id });
  return session!.id;
}

/** Who a session belongs to and what they are in which team at this moment; null when it has ended. */
export async function find(sessionId: string): Promise<SignedIn | null> {
  const rows = await db
    .select({
      seenAt: sessions.seenAt,
      user: { id: users.id, email: users.email, name: users.name, energyUnit: users.energyUnit },
      teamId: memberships.teamId,
      role: memberships.role,
      teamName: teams.name,
      deletionAt: teams.deletionAt,
    })
    .from(sessions)
    .innerJoin(users, eq(users.id, sessions.userId))
    .leftJoin(memberships, eq(memberships.userId, users.id))
    .leftJoin(teams, eq(teams.id, memberships.teamId))
    .where(and(eq(sessions.id, sessionId), isOpen))
    .orderBy(asc(teams.name), asc(teams.id));
  const [first] = rows;
  if (!first) return null;
  if (Date.now() - first.seenAt.getTime() > SEEN_MINUTES * 60_000) await touch(sessionId);
  return {
    sessionId,
    user: first.user,
    memberships: rows.flatMap(({ teamId, role, teamName, deletionAt }) =>
      teamId !== null && role !== null && teamName !== null
        ? [{ userId: first.user.id, teamId, role, teamName, deletionAt }]
        : [],
    ),
  };
}

async function touch(sessionId: string): Promise<void> {
  await db
    .update(sessions)
    .set({ seenAt: sql`now()` })
    .where(eq(sessions.id, sessionId));
}

/** A person's open sessions, the latest used first. */
export function list(userId: string) {
  return db
    .select({
      id: sessions.id,
      userAgent: sessions.userAgent,
      address: sessions.address,
      createdAt: sessions.createdAt,
      seenAt: sessions.seenAt,
    })
    .from(sessions)
    .where(and(eq(sessions.userId, userId), isOpen))
    .orderBy(desc(sessions.seenAt));
}

/** Ends one session of a person; false when it is not an open one of theirs. */
export async function revoke(userId: string, sessionId: string): Promise<boolean> {
  const revoked = await db
    .update(sessions)
    .set({ revokedAt: sql`now()` })
    .where(and(eq(sessions.id, sessionId), eq(sessions.userId, userId), isOpen))
    .returning({ id: sessions.id });
  return revoked.length > 0;
}

/** Ends all sessions of a person, except one where it is named; answers how many. */
export async function revokeAll(
  executor: Executor,
  userId: string,
  except?: string,
): Promise<number> {
  const revoked = await executor
    .update(sessions)
    .set({ revokedAt: sql`now()` })
    .where(and(eq(sessions.userId, userId), isOpen, except ? ne(sessions.id, except) : undefined))
    .returning({ id: sessions.id });
  return revoked.length;
}

/** Ends all sessions of a person but the present one. */
export async function revokeOthers(userId: string, presentId: string): Promise<void> {
  await revokeAll(db, userId, presentId);
}

/** Forgets sessions that ended a while ago. */
export async function forgetEnded(): Promise<void> {
  await db.delete(sessions).where(lt(sessions.expiresAt, sql`now() - interval '30 days'`));
}
