/** Requests with an idempotency key are carried out once and answered the same ever after, for a day. */
import { error } from '@sveltejs/kit';
import { and, eq, isNull, lt, sql } from 'drizzle-orm';
import { createHash } from 'node:crypto';
import { db } from './db';
import { idempotentAnswers } from './db/schema';
import type { Member } from './member';

const LONGEST_KEY = 200;
/** A request that has not ended after this long never will: its process is gone. */
const GIVEN_UP = sql`now() - interval '15 minutes'`;

/**
 * Carries a request out unless the same one was before, which is answered again. Throws 422 where the key was used for
 * another request, and 409 while the first one is still being carried out.
 */
export async function once<T>(
  member: Member,
  key: string | null,
  text: string,
  carryOut: () => Promise<T>,
): Promise<T> {
  if (key === null) return carryOut();
  if (key === '' || key.length > LONGEST_KEY) {
    error(400, `An Idempotency-Key has 1 to ${LONGEST_KEY} characters.`);
  }
  const requestDigest = createHash('sha256').update(text).digest('hex');
  const own = and(
    eq(idempotentAnswers.teamId, member.teamId),
    eq(idempotentAnswers.userId, member.userId),
    eq(idempotentAnswers.key, key),
  );
  await db
    .delete(idempotentAnswers)
    .where(and(own, isNull(idempotentAnswers.answer), lt(idempotentAnswers.createdAt, GIVEN_UP)));
  const { userId, teamId } = member;
  const begun = await db
    .insert(idempotentAnswers)
    .values({ userId, teamId, key, requestDigest })
    .onConflictDoNothing()
    .returning({ key: idempotentAnswers.key });
  if (begun.length === 0) {
    const [before] = await db.select().from(idempotentAnswers).where(own);
    if (before && before.requestDigest !== requestDigest) {
      error(422, 'This Idempotency-Key was used for another request.');
    }
    if (!before || before.answer === null) {
      error(409, 'The first request with this key is still being carried out. Try again later.');
    }
    return before.answer as T;
  }
  try {
    const answer = await carryOut();
    await db.update(idempotentAnswers).set({ answer }).where(own);
    return answer;
  } catch (cause) {
    await db.delete(idempotentAnswers).where(own);
    throw cause;
  }
}

/** Forgets answers that are older than a day. */
export async function forgetOld(): Promise<void> {
  await db
    .delete(idempotentAnswers)
    .where(lt(idempotentAnswers.createdAt, sql`now() - interval '1 day'`));
}
