/** Tokens of the REST interface: made by a person for one of their teams, shown once, stored as hashes. */
import { and, desc, eq, gt, lt, sql } from 'drizzle-orm';
import { scopesFor, type ApiScope } from '../domain/api';
import { findMissing, type Missing, type Strength } from '../domain/sign-in-strength';
import { db } from './db';
import { apiTokens, memberships, secondFactors, teams } from './db/schema';
import { recordEvent } from './events';
import type { Member } from './member';
import { hashSecret, makeSecret } from './secrets';
import type { Membership } from './teams';

/** Begins every token, so that a token that leaked into a file is found by looking for it. */
const PREFIX = 'windlass_';
/** How exact the time of the last use is kept. */
const USED_MINUTES = 5;

/** Makes a token for the member in their team, as strong as their sign-in; the answered text is told only now. */
export async function create(
  member: Member,
  given: { readonly name: string; readonly scope: ApiScope; readonly days: number },
  { method, withSecondFactor }: Strength = { method: 'password', withSecondFactor: false },
): Promise<string> {
  const token = `${PREFIX}${makeSecret()}`;
  await db.transaction(async (tx) => {
    await tx.insert(apiTokens).values({
      userId: member.userId,
      teamId: member.teamId,
      name: given.name,
      tokenHash: hashSecret(token),
      scopes: scopesFor(given.scope),
      method,
      withSecondFactor,
      expiresAt: sql`now() + make_interval(days => ${given.days})`,
    });
    await recordEvent(tx, member, 'make token', `user:${member.userId}`, {
      name: given.name,
      scope: given.scope,
    });
  });
  return token;
}

/** The member's own tokens in the team, the newest first. */
export function list(member: Member) {
  return db
    .select({
      id: apiTokens.id,
      name: apiTokens.name,
      scopes: apiTokens.scopes,
      createdAt: apiTokens.createdAt,
      expiresAt: apiTokens.expiresAt,
      usedAt: apiTokens.usedAt,
    })
    .from(apiTokens)
    .where(
      and(
        eq(apiTokens.userId, member.userId),
        eq(apiTokens.teamId, member.teamId),
        gt(apiTokens.expiresAt, sql`now()`),
      ),
    )
    .orderBy(desc(apiTokens.createdAt));
}

/** Ends one of the member's own tokens at once; false when there is none such. */
export async function revoke(member: Member, tokenId: string): Promise<boolean> {
  return db.transaction(async (tx) => {
    const [revoked] = await tx
      .delete(apiTokens)
      .where(
        and(
          eq(apiTokens.id, tokenId),
          eq(apiTokens.userId, member.userId),
          eq(apiTokens.teamId, member.teamId),
        ),
      )
      .returning({ name: apiTokens.name });
    if (!revoked) return false;
    await recordEvent(tx, member, 'revoke token', `user:${member.userId}`, { name: revoked.name });
    return true;
  });
}

/** Who a token speaks for. */
export interface Bearer {
  readonly member: Membership;
  readonly scopes: readonly ApiScope[];
  /** What the team requires and the token's person or sign-in lacks; null when it may pass. */
  readonly missing: Missing | null;
}

/** Whom a token speaks for at this moment; null when it does not work (any more) or the person left the team. */
export async function findBearer(token: string, address: string): Promise<Bearer | null> {
  const [found] = await db
    .select({
      id: apiTokens.id,
      userId: apiTokens.userId,
      teamId: apiTokens.teamId,
      scopes: apiTokens.scopes,
      usedAt: apiTokens.usedAt,
      role: memberships.role,
      teamName: teams.name,
      requires: {
        secondFactor: teams.requiresSecondFactor,
        singleSignOn: teams.requiresSingleSignOn,
      },
      method: apiTokens.method,
      withSecondFactor: apiTokens.withSecondFactor,
      confirmedAt: secondFactors.confirmedAt,
    })
    .from(apiTokens)
    .innerJoin(teams, eq(teams.id, apiTokens.teamId))
    .innerJoin(
      memberships,
      and(eq(memberships.teamId, apiTokens.teamId), eq(memberships.userId, apiTokens.userId)),
    )
    .leftJoin(secondFactors, eq(secondFactors.userId, apiTokens.userId))
    .where(and(eq(apiTokens.tokenHash, hashSecret(token)), gt(apiTokens.expiresAt, sql`now()`)));
  if (!found) return null;
  const { id, scopes, usedAt, method, withSecondFactor, confirmedAt, ...member } = found;
  if (!usedAt || Date.now() - usedAt.getTime() > USED_MINUTES * 60_000) {
    await db
      .update(apiTokens)
      .set({ usedAt: sql`now()` })
      .where(eq(apiTokens.id, id));
  }
  // Our own second factor counts while it is on; the provider's, when the maker of the token had shown it there.
  const hasSecondFactor = confirmedAt !== null || (method === 'single sign-on' && withSecondFactor);
  const missing = findMissing(member.requires, { method, withSecondFactor: hasSecondFactor });
  return { member: { ...member, address }, scopes, missing };
}

/** Forgets tokens that stopped working a while ago. */
export async function forgetExpired(): Promise<void> {
  await db.delete(apiTokens).where(lt(apiTokens.expiresAt, sql`now() - interval '30 days'`));
}
