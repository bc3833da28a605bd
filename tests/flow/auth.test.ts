/** Accounts and sign-ins against a real database and mail catcher. */
import { eq, sql } from 'drizzle-orm';
import { randomUUID } from 'node:crypto';
import { describe, expect, inject, it } from 'vitest';
import { db } from '$lib/server/db';
import {
  letterTokens,
  memberships,
  rateBuckets,
  sessions,
  teams,
  users,
} from '$lib/server/db/schema';
import { seedDemo } from '$lib/server/demo';
import * as tokens from '$lib/server/letter-tokens';
import { clientNetwork, limitRate } from '$lib/server/rate-limits';
import * as session from '$lib/server/sessions';
import * as account from '$lib/server/users';
import { lettersTo, tokenOf, waitForLetter } from '../support/letters';

const client = { address: '192.0.2.7', userAgent: 'a test' };
const password = 'wet lantern over nine hills';
const other = 'green anvil beside a quiet road';
const { lettersUrl } = inject('mail');
const confirmSubject = 'Confirm your address';
const resetSubject = 'Choose a new password';

const newAddress = () => `${randomUUID().slice(0, 8)}@people.example`;

async function signUp(email = newAddress(), given = password): Promise<string> {
  await account.signUp({ name: 'Ada Falk', email, password: given });
  return email;
}

/** A confirmed account with an open session. */
async function newPerson() {
  const email = await signUp();
  const confirmToken = tokenOf(await waitForLetter(lettersUrl, email, confirmSubject));
  const outcome = await account.signIn({ email, password, confirmToken }, client);
  if (!('sessionId' in outcome)) throw new Error(`Signing in failed: ${JSON.stringify(outcome)}`);
  return { email, ...outcome };
}

const signIn = (email: string, given = password) =>
  account.signIn({ email, password: given }, client);

const countUsers = async (email: string) => db.$count(users, eq(users.email, email));

describe('signing up', () => {
  it('opens an account with a team of its own, which the person leads', async () => {
    const { sessionId, email } = await newPerson();
    const found = await session.find(sessionId);
    expect(found?.user).toMatchObject({ email, name: 'Ada Falk' });
    expect(found?.memberships).toMatchObject([{ role: 'lead', teamName: 'Ada Falk’s team' }]);
  });

  it('stores neither password nor secret in readable form', async () => {
    const email = await signUp();
    const token = tokenOf(await waitForLetter(lettersUrl, email, confirmSubject));
    const [user] = await db.select().from(users).where(eq(users.email, email));
    expect(user!.passwordHash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
    const stored = await db.select().from(letterTokens).where(eq(letterTokens.userId, user!.id));
    expect(JSON.stringify(stored)).not.toContain(token);
  });

  it('keeps the account closed until its address is confirmed, and says so only to who knows the password', async () => {
    const email = await signUp();
    expect(await signIn(email)).toEqual({ fault: 'unconfirmed' });
    expect(await signIn(email, other)).toEqual({ fault: 'wrong' });
  });

  it('confirms an address only with the letter and the password together, and once', async () => {
    const email = await signUp();
    const confirmToken = tokenOf(await waitForLetter(lettersUrl, email, confirmSubject));
    const confirm = (given: string) =>
      account.signIn({ email, password: given, confirmToken }, client);
    expect(await confirm(other)).toEqual({ fault: 'wrong' });
    expect(await confirm(password)).toHaveProperty('sessionId');
    expect(await confirm(password)).toEqual({ fault: 'letter' });
    expect(await signIn(email)).toHaveProperty('sessionId');
  });

  it('does not let one person confirm with the letter of another', async () => {
    const [mine, theirs] = [await signUp(), await signUp()];
    const confirmToken = tokenOf(await waitForLetter(lettersUrl, theirs, confirmSubject));
    expect(await account.signIn({ email: mine, password, confirmToken }, client)).toEqual({
      fault: 'letter',
    });
    expect(await signIn(mine)).toEqual({ fault: 'unconfirmed' });
  });

  it('answers the same for a taken address, tells its owner, and changes nothing', async () => {
    const { email } = await newPerson();
    expect(await account.signUp({ name: 'Somebody', email, password: other })).toBeUndefined();
    await waitForLetter(lettersUrl, email, 'You have an account already');
    expect(await signIn(email, other)).toEqual({ fault: 'wrong' });
    expect(await signIn(email)).toHaveProperty('sessionId');
  });

  it('lets the latest sign-up of an unconfirmed address count, with one account and one team', async () => {
    const email = await signUp(newAddress(), other);
    const first = tokenOf(await waitForLetter(lettersUrl, email, confirmSubject));
    await signUp(email);
    const second = tokenOf(await waitForLetter(lettersUrl, email, confirmSubject, 2));
    const confirm = (confirmToken: string, given: string) =>
      account.signIn({ email, password: given, confirmToken }, client);
    expect(await confirm(first, password)).toEqual({ fault: 'letter' });
    expect(await confirm(second, other)).toEqual({ fault: 'wrong' });
    const outcome = await confirm(second, password);
    expect(outcome).toHaveProperty('sessionId');
    expect(await countUsers(email)).toBe(1);
    const found = await session.find((outcome as { sessionId: string }).sessionId);
    expect(found?.memberships).toHaveLength(1);
  });

  it('opens one account when two sign-ups come at the same moment', async () => {
    const email = newAddress();
    await Promise.all([signUp(email), signUp(email)]);
    expect(await countUsers(email)).toBe(1);
    const [user] = await db.select().from(users).where(eq(users.email, email));
    expect(await db.$count(memberships, eq(memberships.userId, user!.id))).toBe(1);
  });
});

describe('sessions', () => {
  it('end at once when revoked, and only by their owner', async () => {
    const { userId, sessionId } = await newPerson();
    const stranger = await newPerson();
    expect(await session.revoke(stranger.userId, sessionId)).toBe(false);
    expect(await session.find(sessionId)).not.toBeNull();
    expect(await session.revoke(userId, sessionId)).toBe(true);
    expect(await session.find(sessionId)).toBeNull();
    expect(await session.revoke(userId, sessionId)).toBe(false);
  });

  it('end when their time is over', async () => {
    const { sessionId } = await newPerson();
    await db
      .update(sessions)
      .set({ expiresAt: sql`now() - interval '1 second'` })
      .where(eq(sessions.id, sessionId));
    expect(await session.find(sessionId)).toBeNull();
  });

  it('show a changed role and a lost membership at the next request', async () => {
    const { userId, sessionId } = await newPerson();
    await db.update(memberships).set({ role: 'reader' }).where(eq(memberships.userId, userId));
    expect((await session.find(sessionId))?.memberships[0]?.role).toBe('reader');
    await db.delete(memberships).where(eq(memberships.userId, userId));
    expect((await session.find(sessionId))?.memberships).toEqual([]);
  });

  it('list a person’s own open sign-ins only', async () => {
    const { email, userId, sessionId } = await newPerson();
    await newPerson();
    const second = (await signIn(email)) as { sessionId: string };
    const ids = (await session.list(userId)).map(({ id }) => id);
    expect(new Set(ids)).toEqual(new Set([sessionId, second.sessionId]));
    await session.revokeOthers(userId, sessionId);
    expect((await session.list(userId)).map(({ id }) => id)).toEqual([sessionId]);
  });
});

describe('passwords', () => {
  it('are reset by a letter that works once, which ends every sign-in', async () => {
    const { email, sessionId } = await newPerson();
    account.forgotPassword(email);
    const token = tokenOf(await waitForLetter(lettersUrl, email, resetSubject));
    expect(await account.resetPassword(token, other)).toBe('done');
    expect(await account.resetPassword(token, password)).toBe('letter');
    expect(await session.find(sessionId)).toBeNull();
    expect(await signIn(email)).toEqual({ fault: 'wrong' });
    expect(await signIn(email, other)).toHaveProperty('sessionId');
    await waitForLetter(lettersUrl, email, 'Your password was changed');
  });

  it('are reset by only one of two who use the letter at the same moment', async () => {
    const { email } = await newPerson();
    account.forgotPassword(email);
    const token = tokenOf(await waitForLetter(lettersUrl, email, resetSubject));
    const outcomes = await Promise.all([
      account.resetPassword(token, other),
      account.resetPassword(token, other),
    ]);
    expect(outcomes.sort()).toEqual(['done', 'letter']);
  });

  it('are not reset by an older letter once a newer one was sent, nor by an expired one', async () => {
    const { email, userId } = await newPerson();
    const older = await tokens.issue(db, userId, 'reset-password');
    const newer = await tokens.issue(db, userId, 'reset-password');
    expect(await account.resetPassword(older, other)).toBe('letter');
    await db
      .update(letterTokens)
      .set({ expiresAt: sql`now() - interval '1 second'` })
      .where(eq(letterTokens.userId, userId));
    expect(await account.resetPassword(newer, other)).toBe('letter');
    expect(await signIn(email)).toHaveProperty('sessionId');
  });

  it('cannot be reset with the letter that confirms an address', async () => {
    const email = await signUp();
    const token = tokenOf(await waitForLetter(lettersUrl, email, confirmSubject));
    expect(await account.resetPassword(token, other)).toBe('letter');
  });

  it('that are weak do not use the letter up', async () => {
    const { userId } = await newPerson();
    const token = await tokens.issue(db, userId, 'reset-password');
    expect(await account.resetPassword(token, 'password1234')).toHaveProperty('fault');
    expect(await account.resetPassword(token, 'Ada Falk 1234')).toHaveProperty('fault');
    expect(await account.resetPassword(token, other)).toBe('done');
  });

  it('send nothing for an address without an account', async () => {
    const [unknown, known] = [newAddress(), (await newPerson()).email];
    account.forgotPassword(unknown);
    account.forgotPassword(known);
    // The letter to the known address was asked for later, so by then the other would be there.
    await waitForLetter(lettersUrl, known, resetSubject);
    expect(await lettersTo(lettersUrl, unknown)).toEqual([]);
  });

  it('are changed by who knows the present one, which ends the other sign-ins', async () => {
    const { email, userId, sessionId } = await newPerson();
    const second = (await signIn(email)) as { sessionId: string };
    const change = (current: string) =>
      account.changePassword({ userId, sessionId }, { current, password: other });
    expect(await change('not the password at all')).toMatchObject({ field: 'current' });
    expect(await session.find(second.sessionId)).not.toBeNull();
    expect(await change(password)).toBeNull();
    expect(await session.find(second.sessionId)).toBeNull();
    expect(await session.find(sessionId)).not.toBeNull();
    expect(await signIn(email, other)).toHaveProperty('sessionId');
  });
});

describe('rate limits', () => {
  it('let a bucket’s worth through, then say how long to wait', async () => {
    const bucket = ['sign in to an address', newAddress()] as const;
    for (let count = 0; count < 10; count += 1) expect(await limitRate(bucket)).toBeNull();
    // One token a minute.
    const wait = await limitRate(bucket);
    expect(wait).toBeGreaterThan(50);
    expect(wait).toBeLessThanOrEqual(60);
    expect(await limitRate(['sign in to an address', newAddress()])).toBeNull();
  });

  it('hold when many try at the same moment', async () => {
    const bucket = ['sign in to an address', newAddress()] as const;
    const waits = await Promise.all(Array.from({ length: 25 }, () => limitRate(bucket)));
    expect(waits.filter((wait) => wait === null)).toHaveLength(10);
  });

  it('fill again with time, up to their capacity', async () => {
    const bucket = ['sign in to an address', newAddress()] as const;
    for (let count = 0; count < 11; count += 1) await limitRate(bucket);
    const refill = (minutes: number) =>
      db
        .update(rateBuckets)
        .set({ refilledAt: sql`${rateBuckets.refilledAt} - make_interval(mins => ${minutes})` });
    await refill(2);
    const afterTwoMinutes = [await limitRate(bucket), await limitRate(bucket)];
    expect(afterTwoMinutes).toEqual([null, null]);
    expect(await limitRate(bucket)).not.toBeNull();
    await refill(600);
    const waits = [];
    for (let count = 0; count < 11; count += 1) waits.push(await limitRate(bucket));
    expect(waits.filter((wait) => wait === null)).toHaveLength(10);
  });

  it.each([
    ['192.0.2.7', '192.0.2.7'],
    ['::ffff:192.0.2.7', '192.0.2.7'],
    ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
    ['2001:db8:1:2:ffff::1', '2001:db8:1:2::/64'],
    ['2001:0db8::1', '2001:db8:0:0::/64'],
    ['::1', '0:0:0:0::/64'],
  ])('count %s as %s', (address, network) => {
    expect(clientNetwork(address)).toBe(network);
  });
});

describe('the demo', () => {
  it('is put in once, however often it is asked for, and its members can sign in', async () => {
    const first = await seedDemo();
    expect(await seedDemo()).toEqual(first);
    expect(await db.$count(teams, eq(teams.name, 'Skerry Coatings'))).toBe(1);
    expect(first.map(({ role }) => role)).toEqual([
      'lead, operator',
      'modeler',
      'chemist',
      'reader',
    ]);
    for (const { email, role } of first) {
      const outcome = await signIn(email, process.env['WINDLASS_DEMO_PASSWORD']);
      const found = await session.find((outcome as { sessionId: string }).sessionId);
      expect(found?.memberships).toMatchObject([
        { role: role.split(',')[0], teamName: 'Skerry Coatings' },
      ]);
    }
  });
});
