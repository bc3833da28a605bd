/** Confirmed accounts with a password, and with a second factor, for flow tests. */
import { eq } from 'drizzle-orm';
import { randomUUID } from 'node:crypto';
import { Secret, TOTP } from 'otpauth';
import { db } from '$lib/server/db';
import { secondFactors, users } from '$lib/server/db/schema';
import { hashPassword } from '$lib/server/passwords';
import * as secondFactor from '$lib/server/second-factor';
import * as sessions from '$lib/server/sessions';

export const client = { address: '192.0.2.7', userAgent: 'a test' };
export const password = 'wet lantern over nine hills';

/** Hashing is slow on purpose; the tests' one password needs it once. */
const passwordHash = hashPassword(password);

export const newAddress = () => `${randomUUID().slice(0, 8)}@people.example`;

export interface Person {
  readonly userId: string;
  readonly email: string;
}

/** A confirmed account with a password. */
export async function newPerson(email = newAddress()): Promise<Person> {
  const [user] = await db
    .insert(users)
    .values({
      email,
      name: 'Ada Falk',
      passwordHash: await passwordHash,
      confirmedAt: new Date(),
    })
    .returning({ id: users.id });
  return { userId: user!.id, email };
}

/** The code that the person's app shows, so many steps of 30 s from now. */
export function codeOf(secret: string, steps = 0): string {
  return new TOTP({ secret: Secret.fromBase32(secret) }).generate({
    timestamp: Date.now() + steps * 30_000,
  });
}

/** Lets codes be used that were used before, as if time had passed. */
export async function forgetUsedCodes(userId: string): Promise<void> {
  await db.update(secondFactors).set({ lastStep: 0 }).where(eq(secondFactors.userId, userId));
}

/** A person with a second factor on, the secret of their app, and their recovery codes. */
export async function newPersonWithSecondFactor() {
  const person = await newPerson();
  const sessionId = await sessions.begin(person.userId, client);
  const { secret } = (await secondFactor.setUp({ id: person.userId, email: person.email }))!;
  const codes = await secondFactor.switchOn({ userId: person.userId, sessionId }, codeOf(secret));
  await forgetUsedCodes(person.userId);
  return { ...person, sessionId, secret, codes: codes! };
}
