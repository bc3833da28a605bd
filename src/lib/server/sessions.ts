/** Sign-ins that have not ended. The cookie only names a row here, so ending the row ends the sign-in at once. */
import { and, asc, desc, eq, gt, isNull, lt, ne, sql } from 'drizzle-orm';
import type { EnergyUnit } from '../domain/energy-units';
import type { Strength } from '../domain/sign-in-strength';
import { db, type Executor } from './db';
import { memberships, sessions, teams, users } from './db/schema';
import type { Membership } from './teams';

/** A sign-in ends after this long, whatever happens. */
export const SESSION_DAYS = 30;
/** How exact the time of the last visit is kept. */
const SEEN_MINUTES = 5;
const LONGEST_USER_AGENT = 300;

/** A sign-in that nobody used for so long ends as well. */
const IDLE_DAYS = 7;

/** Where a sign-in comes from, as far as it can be told. */
export interface Client {
  readonly address: string;
  readonly userAgent: string;
}

/** How, and when, somebody proved who they are; null where the identity provider did not say when. */
export interface Proof extends Strength {
  readonly provedAt: Date | null;
}

/** The proof that a password given at this moment is. */
export const byPassword = (): Proof => ({
  method: 'password',
  withSecondFactor: false,
  provedAt: new Date(),
});

/** What a valid session tells about a request. */
export interface SignedIn {
  readonly sessionId: string;
  readonly user: {
    readonly id: string;
    readonly email: string;
    readonly name: string;
    readonly energyUnit: EnergyUnit;
    readonly isOperator: boolean;
  };
  readonly proof: Proof;
  readonly memberships: readonly Membership[];
}

const isOpen = and(
  isNull(sessions.revokedAt),
  gt(sessions.expiresAt, sql`now()`),
  gt(sessions.seenAt, sql`now() - make_interval(days => ${IDLE_DAYS})`),
);

/** Begins a session and answers its id. */
export async function begin(
  userId: string,
  client: Client,
  proof: Proof = byPassword(),
  executor: Executor = db,
): Promise<string> {
  const [session] = await executor
    .insert(sessions)
    .values({
      userId,
      ...proof,
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
      user: {
        id: users.id,
        email: users.email,
        name: users.name,
        energyUnit: users.energyUnit,
        isOperator: users.isOperator,
      },
      teamId: memberships.teamId,
      role: memberships.role,
      teamName: teams.name,
      deletionAt: teams.deletionAt,
      secondFactor: teams.requiresSecondFactor,
      singleSignOn: teams.requiresSingleSignOn,
      method: sessions.method,
      withSecondFactor: sessions.withSecondFactor,
      provedAt: sessions.provedAt,
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
  const { user, method, withSecondFactor, provedAt } = first;
  return {
    sessionId,
    user,
    proof: { method, withSecondFactor, provedAt },
    memberships: rows.flatMap(
      ({ teamId, role, teamName, deletionAt, secondFactor, singleSignOn }) =>
        teamId !== null && role !== null && teamName !== null
          ? [
              {
                userId: user.id,
                teamId,
                role,
                teamName,
                deletionAt,
                requires: { secondFactor: secondFactor!, singleSignOn: singleSignOn! },
              },
            ]
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

/**
 * Puts a new session in the place of one whose person proved again who they are, so that an id that leaked before is of
 * no use after (OWASP ASVS 5.0, 7.2.4).
 */
export async function renew(
  old: { readonly userId: string; readonly sessionId: string },
  client: Client,
  proof: Proof,
): Promise<string> {
  return db.transaction(async (tx) => {
    await tx
      .update(sessions)
      .set({ revokedAt: sql`now()` })
      .where(and(eq(sessions.id, old.sessionId), eq(sessions.userId, old.userId)));
    return begin(old.userId, client, proof, tx);
  });
}

/** Remembers that the session's person showed a second factor. */
export async function noteSecondFactor(executor: Executor, sessionId: string): Promise<void> {
  await executor.update(sessions).set({ withSecondFactor: true }).where(eq(sessions.id, sessionId));
}

/** Takes back that a person's sessions showed a second factor, since there is none any more. */
export async function forgetSecondFactor(executor: Executor, userId: string): Promise<void> {
  await executor
    .update(sessions)
    .set({ withSecondFactor: false })
    .where(and(eq(sessions.userId, userId), isOpen));
}

/** A person's open sessions, the latest used first. */
export function list(userId: string) {
  return db
    .select({
      id: sessions.id,
      userAgent: sessions.userAgent,
      address: sessions.address,
      method: sessions.method,
      withSecondFactor: sessions.withSecondFactor,
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
