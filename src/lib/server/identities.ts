/**
 * People who come from the identity provider. Issuer and subject decide who somebody is; an address only opens the way
 * the first time, and only when both sides know it to be theirs: the provider says `email_verified`, and here the
 * account's owner confirmed it by a letter. Later changes of the address at the provider reassign nothing.
 */
import { and, eq, isNull, sql } from 'drizzle-orm';
import type { IdentityClaims } from '../domain/identity-claims';
import { db, type Executor } from './db';
import { identities, memberships, teams, users } from './db/schema';
import { environment } from './environment';
import { recordAccountEvent } from './events';
import * as letterTokens from './letter-tokens';
import { singleSignOnLinkedLetter } from './letters';
import { post } from './mail';
import * as sessions from './sessions';
import type { Client, Proof } from './sessions';
import { proceed, type Begun } from './sign-in-steps';
import { openOwnTeam } from './users';

/** 'unverified': the provider does not vouch for an address; 'taken': the address' account is another subject's. */
export type IdentityFault = 'unverified' | 'taken' | 'other person';

interface Found {
  readonly userId: string;
  /** True when an account that was there before is opened this way from now on. */
  readonly isLinked: boolean;
}

/** How strong a sign-in the provider tells of. */
export function proofOf({ auth_time: at, amr }: IdentityClaims): Proof {
  return {
    method: 'single sign-on',
    withSecondFactor: amr?.includes('mfa') ?? false,
    provedAt: at === undefined ? null : new Date(Math.min(at * 1000, Date.now())),
  };
}

/** Signs somebody in whom the provider sent; `present` is who is signed in already, to whom nobody else may come back. */
export async function signIn(
  claims: IdentityClaims,
  client: Client,
  present: { readonly userId: string; readonly sessionId: string; readonly proof: Proof } | null,
): Promise<Begun | { readonly fault: IdentityFault }> {
  const found = await findFor(claims, present?.userId ?? null);
  if ('fault' in found) return found;
  const { userId } = found;
  if (found.isLinked) await tellOwner(userId);
  const proof = proofOf(claims);
  if (!present) return proceed(userId, proof, client);
  const withSecondFactor = proof.withSecondFactor || present.proof.withSecondFactor;
  const sessionId = await sessions.renew(present, client, { ...proof, withSecondFactor });
  return { userId, sessionId };
}

class OtherPerson extends Error {}

/** Finds or opens the account; where somebody is signed in, nothing is done for anybody else. */
async function findFor(
  claims: IdentityClaims,
  presentId: string | null,
): Promise<Found | { fault: IdentityFault }> {
  try {
    return await db.transaction(async (tx) => {
      const found = await findOrOpen(tx, claims);
      const isOther = 'userId' in found && presentId !== null && found.userId !== presentId;
      // Thrown, so that an account opened a moment ago is rolled back.
      if (isOther) throw new OtherPerson();
      return found;
    });
  } catch (error) {
    if (error instanceof OtherPerson) return { fault: 'other person' };
    throw error;
  }
}

async function findBySubject(executor: Executor, { iss, sub }: IdentityClaims) {
  const [known] = await executor
    .select({ userId: identities.userId })
    .from(identities)
    .where(and(eq(identities.issuer, iss), eq(identities.subject, sub)));
  return known ?? null;
}

async function findOrOpen(
  tx: Executor,
  claims: IdentityClaims,
): Promise<Found | { fault: IdentityFault }> {
  const known = await findBySubject(tx, claims);
  if (known) return { ...known, isLinked: false };
  const { email } = claims;
  if (!email || !claims.email_verified) return { fault: 'unverified' };
  // Two browsers that come for the first time at once wait for each other.
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`identity ${email}`}, 0))`);
  const first = await findBySubject(tx, claims);
  if (first) return { ...first, isLinked: false };
  const opened = await open(tx, email, claims.name ?? email.split('@')[0]!);
  const isBound = await bind(tx, opened.userId, claims);
  if (!isBound) return { fault: 'taken' };
  const action = opened.isLinked ? 'linked single sign-on' : 'signed up by single sign-on';
  await recordAccountEvent(tx, opened.userId, action);
  return opened;
}

/** Binds the subject to the account; false when the account belongs to another subject of the same provider. */
async function bind(tx: Executor, userId: string, { iss, sub }: IdentityClaims): Promise<boolean> {
  const bound = await tx
    .insert(identities)
    .values({ issuer: iss, subject: sub, userId })
    .onConflictDoNothing()
    .returning({ userId: identities.userId });
  return bound.length > 0;
}

/** The account of an address that the provider vouches for: the confirmed one there is, or one that starts anew. */
async function open(tx: Executor, email: string, name: string): Promise<Found> {
  const [created] = await tx
    .insert(users)
    .values({ email, name, confirmedAt: sql`now()` })
    .onConflictDoNothing()
    .returning({ id: users.id });
  if (created) {
    await openOwnTeam(tx, created.id, name);
    return { userId: created.id, isLinked: false };
  }
  const [present] = await tx
    .select({ id: users.id, confirmedAt: users.confirmedAt })
    .from(users)
    .where(eq(users.email, email))
    .for('update');
  const userId = present!.id;
  if (present!.confirmedAt) return { userId, isLinked: true };
  await startAnew(tx, userId, name);
  return { userId, isLinked: false };
}

/**
 * Gives an account that nobody ever confirmed to the person whom the provider vouches for. Whoever signed up with the
 * address before may have been anybody: their password would be a back door into what is now somebody else's account,
 * so it goes, with the letters they asked for and the names they chose.
 */
async function startAnew(tx: Executor, userId: string, name: string): Promise<void> {
  await tx
    .update(users)
    .set({ name, passwordHash: null, confirmedAt: sql`now()` })
    .where(and(eq(users.id, userId), isNull(users.confirmedAt)));
  await letterTokens.revoke(tx, userId, 'confirm-address');
  await letterTokens.revoke(tx, userId, 'reset-password');
  await sessions.revokeAll(tx, userId);
  await openOwnTeam(tx, userId, name);
  const own = tx
    .select({ id: memberships.teamId })
    .from(memberships)
    .where(and(eq(memberships.userId, userId), eq(memberships.role, 'lead')));
  await tx
    .update(teams)
    .set({ name: `${name}’s team` })
    .where(sql`${teams.id} in ${own}`);
}

async function tellOwner(userId: string): Promise<void> {
  const [owner] = await db
    .select({ email: users.email, name: users.name })
    .from(users)
    .where(eq(users.id, userId));
  const letter = singleSignOnLinkedLetter(owner!.name, environment.WINDLASS_OIDC_NAME);
  post(owner!.email, letter);
}

/** True when the person's account is bound to a subject of the provider in use. */
export async function isBoundToProvider(userId: string): Promise<boolean> {
  const issuer = environment.WINDLASS_OIDC_ISSUER;
  if (issuer === undefined) return false;
  const isTheirs = and(eq(identities.userId, userId), eq(identities.issuer, issuer));
  return (await db.$count(identities, isTheirs)) > 0;
}
