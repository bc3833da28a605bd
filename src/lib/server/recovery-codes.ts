/** Codes for who has lost the second factor: shown once, stored as hashes, each good once. */
import { and, eq, isNull, sql } from 'drizzle-orm';
import { randomInt } from 'node:crypto';
import { RECOVERY_ALPHABET, RECOVERY_CODES, RECOVERY_LENGTH } from '../domain/second-factor';
import { db, type Executor } from './db';
import { recoveryCodes } from './db/schema';
import { hashPassword, verifyPassword } from './passwords';

const makeCode = () =>
  Array.from(
    { length: RECOVERY_LENGTH },
    () => RECOVERY_ALPHABET[randomInt(RECOVERY_ALPHABET.length)],
  ).join('');

/** Makes new codes in place of all earlier ones; the answered text is told only now. */
export async function replace(executor: Executor, userId: string): Promise<string[]> {
  const codes = Array.from({ length: RECOVERY_CODES }, makeCode);
  // 50 random bits: short enough to be typed, so they need the slow hash of passwords (OWASP ASVS 5.0, 6.5.2).
  const hashes = await Promise.all(codes.map(hashPassword));
  await remove(executor, userId);
  await executor.insert(recoveryCodes).values(hashes.map((codeHash) => ({ userId, codeHash })));
  return codes;
}

/** Forgets a person's codes. */
export async function remove(executor: Executor, userId: string): Promise<void> {
  await executor.delete(recoveryCodes).where(eq(recoveryCodes.userId, userId));
}

const isLeft = (userId: string) =>
  and(eq(recoveryCodes.userId, userId), isNull(recoveryCodes.usedAt));

/** How many codes a person has left. */
export function count(userId: string, executor: Executor = db): Promise<number> {
  return executor.$count(recoveryCodes, isLeft(userId));
}

/** Uses a code up; of two who try the same at once only one succeeds. */
export async function redeem(executor: Executor, userId: string, code: string): Promise<boolean> {
  const left = await executor
    .select({ id: recoveryCodes.id, codeHash: recoveryCodes.codeHash })
    .from(recoveryCodes)
    .where(isLeft(userId));
  for (const { id, codeHash } of left) {
    if (!(await verifyPassword(codeHash, code))) continue;
    const used = await executor
      .update(recoveryCodes)
      .set({ usedAt: sql`now()` })
      .where(and(eq(recoveryCodes.id, id), isNull(recoveryCodes.usedAt)))
      .returning({ id: recoveryCodes.id });
    return used.length > 0;
  }
  return false;
}
