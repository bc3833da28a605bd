/** Single-use secrets that are sent by mail; only their hashes are stored. */
import { and, eq, gt, isNull, lt, sql } from 'drizzle-orm';
import { db, type Executor } from './db';
import { letterTokens, users } from './db/schema';
import { hashSecret, makeSecret } from './secrets';

export type LetterPurpose = (typeof letterTokens.purpose.enumValues)[number];

/** How long a letter is good for, hours. */
export const LETTER_HOURS: Record<LetterPurpose, number> = {
  'confirm-address': 24,
  'reset-password': 1,
};

const isUsable = (token: string, purpose: LetterPurpose) =>
  and(
    eq(letterTokens.tokenHash, hashSecret(token)),
    eq(letterTokens.purpose, purpose),
    isNull(letterTokens.usedAt),
    gt(letterTokens.expiresAt, sql`now()`),
  );

/** Makes a new secret; earlier ones for the same purpose stop working. */
export async function issue(
  executor: Executor,
  userId: string,
  purpose: LetterPurpose,
): Promise<string> {
  await revoke(executor, userId, purpose);
  const token = makeSecret();
  await executor.insert(letterTokens).values({
    tokenHash: hashSecret(token),
    userId,
    purpose,
    expiresAt: sql`now() + make_interval(hours => ${LETTER_HOURS[purpose]})`,
  });
  return token;
}

/** Ends all secrets of a person for a purpose. */
export async function revoke(
  executor: Executor,
  userId: string,
  purpose: LetterPurpose,
): Promise<void> {
  await executor
    .delete(letterTokens)
    .where(
      and(
        eq(letterTokens.userId, userId),
        eq(letterTokens.purpose, purpose),
        isNull(letterTokens.usedAt),
      ),
    );
}

/** Whose secret it is, without using it up; null when it is unknown, used or expired. */
export async function findOwner(
  token: string,
  purpose: LetterPurpose,
): Promise<{ id: string; email: string; name: string } | null> {
  const [owner] = await db
    .select({ id: users.id, email: users.email, name: users.name })
    .from(letterTokens)
    .innerJoin(users, eq(users.id, letterTokens.userId))
    .where(isUsable(token, purpose));
  return owner ?? null;
}

/** Uses a secret up and answers whose it was; of two that try at once only one succeeds. */
export async function redeem(
  executor: Executor,
  token: string,
  purpose: LetterPurpose,
): Promise<string | null> {
  const [used] = await executor
    .update(letterTokens)
    .set({ usedAt: sql`now()` })
    .where(isUsable(token, purpose))
    .returning({ userId: letterTokens.userId });
  return used?.userId ?? null;
}

/** Forgets secrets that stopped working a while ago. */
export async function forgetExpired(): Promise<void> {
  await db.delete(letterTokens).where(lt(letterTokens.expiresAt, sql`now() - interval '7 days'`));
}
