/** Proving once more who one is, with the password and, where it is on, the second factor. */
import { eq } from 'drizzle-orm';
import type { Strength } from '../domain/sign-in-strength';
import { db } from './db';
import { users } from './db/schema';
import { recordAccountEvent } from './events';
import { verifyPassword } from './passwords';
import * as secondFactor from './second-factor';
import * as sessions from './sessions';
import type { Client } from './sessions';

export type ProofFault = { readonly fault: 'password' | 'code' };

/** True when the person has a password. */
export async function hasPassword(userId: string): Promise<boolean> {
  return (await findHash(userId)) !== null;
}

async function findHash(userId: string): Promise<string | null> {
  const [user] = await db
    .select({ passwordHash: users.passwordHash })
    .from(users)
    .where(eq(users.id, userId));
  return user?.passwordHash ?? null;
}

/** Checks password and code and puts a fresh session in the place of the present one. */
export async function proveAgain(
  who: { readonly userId: string; readonly sessionId: string; readonly shown: Strength },
  given: { readonly password: string; readonly code: string },
  client: Client,
): Promise<{ readonly sessionId: string } | ProofFault | { readonly wait: number }> {
  const { userId } = who;
  if (!(await verifyPassword(await findHash(userId), given.password))) {
    return { fault: 'password' };
  }
  const needsCode = await secondFactor.isOn(userId);
  if (needsCode) {
    const wait = await secondFactor.limitCodes(userId, client.address);
    if (wait !== null) return { wait };
    if (!(await secondFactor.takeCode(db, userId, given.code))) {
      return { fault: 'code' };
    }
  }
  await recordAccountEvent(db, userId, 'proved again who they are');
  const sessionId = await sessions.renew(who, client, {
    method: who.shown.method,
    withSecondFactor: needsCode || who.shown.withSecondFactor,
    provedAt: new Date(),
  });
  return { sessionId };
}
