/** What a team may ask of its members' sign-ins before they see its data. */
import { and, eq, sql } from 'drizzle-orm';
import {
  findMissing,
  type Missing,
  type Strength,
  type TeamRequirements,
} from '../domain/sign-in-strength';
import { db } from './db';
import { memberships, secondFactors, identities, teams, users } from './db/schema';
import { environment } from './environment';
import { recordEvent } from './events';
import { require, type Member } from './member';

/** What is missing and what to do, for a person at a page. */
export function sayWhatIsMissing(missing: Missing): string {
  return missing === 'second factor'
    ? 'This team requires a second factor. Switch yours on under Account, or sign in with it.'
    : `This team requires signing in through ${environment.WINDLASS_OIDC_NAME}. Sign in that way.`;
}

/** What is missing and what to do, for who asks with a token. */
export function sayWhatTokenMisses(missing: Missing): string {
  return missing === 'second factor'
    ? 'This team requires a second factor of the people its tokens speak for. Switch yours on under Account; the token works again then.'
    : `This team requires signing in through ${environment.WINDLASS_OIDC_NAME}. Sign in that way and make a new token; this one was made after a password.`;
}

/**
 * Sets what the team requires; refused where the lead's own sign-in would not pass, so that nobody locks themselves out.
 * @returns what the lead lacks, or null when it is set
 */
export async function setRequirements(
  member: Member,
  requires: TeamRequirements,
  own: Strength,
): Promise<Missing | null> {
  require(member, 'manage members');
  const missing = findMissing(requires, own);
  if (missing) return missing;
  await db.transaction(async (tx) => {
    await tx
      .update(teams)
      .set({
        requiresSecondFactor: requires.secondFactor,
        requiresSingleSignOn: requires.singleSignOn,
      })
      .where(eq(teams.id, member.teamId));
    await recordEvent(tx, member, 'set sign-in rules', `team:${member.teamId}`, { ...requires });
  });
  return null;
}

/** The members with what they have: a lead sees who will be asked to do something. */
export function listReadiness(member: Member) {
  require(member, 'manage members');
  const issuer = environment.WINDLASS_OIDC_ISSUER ?? '';
  return db
    .select({
      id: users.id,
      name: users.name,
      email: users.email,
      hasSecondFactor: sql<boolean>`${secondFactors.confirmedAt} is not null`,
      hasSingleSignOn: sql<boolean>`${identities.subject} is not null`,
    })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .leftJoin(secondFactors, eq(secondFactors.userId, users.id))
    .leftJoin(identities, and(eq(identities.userId, users.id), eq(identities.issuer, issuer)))
    .where(eq(memberships.teamId, member.teamId))
    .orderBy(users.name, users.id);
}
