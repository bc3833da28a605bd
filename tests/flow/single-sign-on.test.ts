/** Who an identity provider sends is whose account here: safe linking, and attempts to take accounts over. */
import { eq } from 'drizzle-orm';
import { randomUUID } from 'node:crypto';
import { describe, expect, inject, it } from 'vitest';
import { identityClaimsSchema } from '$lib/domain/identity-claims';
import { db } from '$lib/server/db';
import { identities as identityRows, memberships, users } from '$lib/server/db/schema';
import * as identities from '$lib/server/identities';
import * as sessions from '$lib/server/sessions';
import * as account from '$lib/server/users';
import {
  client,
  newAddress,
  newPerson,
  newPersonWithSecondFactor,
  password,
} from '../support/accounts';
import { lettersTo, tokenOf, waitForLetter } from '../support/letters';

const { lettersUrl } = inject('mail');
const ISSUER = 'https://identity.example';

/** What the provider tells about somebody, as the callback reads it. */
const claims = (given: Record<string, unknown>) =>
  identityClaimsSchema.parse({
    iss: ISSUER,
    sub: randomUUID(),
    name: 'Runa Dahl',
    email_verified: true,
    ...given,
  });

const arrive = (given: ReturnType<typeof claims>) => identities.signIn(given, client, null);

async function arriveWell(given: ReturnType<typeof claims>) {
  const outcome = await arrive(given);
  if (!('sessionId' in outcome)) throw new Error(`Not signed in: ${JSON.stringify(outcome)}`);
  return outcome;
}

const findUser = async (email: string) =>
  (await db.select().from(users).where(eq(users.email, email)))[0];

describe('somebody new', () => {
  it('gets a confirmed account without a password, and a team of their own', async () => {
    const email = newAddress();
    const { sessionId } = await arriveWell(claims({ email: email.toUpperCase() }));
    const found = await sessions.find(sessionId);
    expect(found).toMatchObject({
      user: { email, name: 'Runa Dahl' },
      proof: { method: 'single sign-on' },
      memberships: [{ role: 'lead', teamName: 'Runa Dahl’s team' }],
    });
    expect(await findUser(email)).toMatchObject({ passwordHash: null });
    expect(await account.signIn({ email, password }, client)).toEqual({ fault: 'wrong' });
  });

  // 6.8.2, 10.5: only what the provider vouches for.
  it.each([
    ['no address', { email: undefined }],
    ['an address that is not verified', { email_verified: false }],
    ['an address of which nothing is said', { email_verified: undefined }],
    ['the word instead of the truth', { email_verified: 'true' }],
  ])('is turned away with %s, and nothing is stored', async (_, given) => {
    const email = newAddress();
    expect(await arrive(claims({ email, ...given }))).toEqual({ fault: 'unverified' });
    expect(await findUser(email)).toBeUndefined();
  });

  it('gets one account when two browsers arrive at the same moment', async () => {
    const told = claims({ email: newAddress() });
    const outcomes = await Promise.all([arriveWell(told), arriveWell(told)]);
    expect(outcomes[0]!.userId).toBe(outcomes[1]!.userId);
    expect(await db.$count(memberships, eq(memberships.userId, outcomes[0]!.userId))).toBe(1);
  });
});

describe('a confirmed account with the same address', () => {
  it('is opened when the provider vouches for the address, keeps its password, and its owner is told', async () => {
    const { userId, email } = await newPerson();
    expect(await arriveWell(claims({ email }))).toMatchObject({ userId });
    await waitForLetter(lettersUrl, email, 'Your account can be opened another way');
    expect(await account.signIn({ email, password }, client)).toHaveProperty('sessionId');
  });

  it('is not opened for an address that is not verified', async () => {
    const { email, userId } = await newPerson();
    expect(await arrive(claims({ email, email_verified: false }))).toEqual({ fault: 'unverified' });
    expect(await db.$count(identityRows, eq(identityRows.userId, userId))).toBe(0);
  });

  it('is not opened for another person of the provider who has the address now', async () => {
    const { email } = await newPerson();
    await arriveWell(claims({ email }));
    expect(await arrive(claims({ email }))).toEqual({ fault: 'taken' });
  });

  it('still asks for the second factor where one is on', async () => {
    const { email } = await newPersonWithSecondFactor();
    expect(await arrive(claims({ email }))).toHaveProperty('stepId');
  });
});

describe('an account that nobody confirmed', () => {
  it('goes to the person whom the provider vouches for, without the password and letters of who signed up before', async () => {
    const email = newAddress();
    await account.signUp({ name: 'Mallory', email, password });
    const confirmToken = tokenOf(await waitForLetter(lettersUrl, email, 'Confirm your address'));
    const { userId, sessionId } = await arriveWell(claims({ email }));
    expect(await account.signIn({ email, password }, client)).toEqual({ fault: 'wrong' });
    const confirmed = await account.signIn({ email, password, confirmToken }, client);
    expect(confirmed).toEqual({ fault: 'wrong' });
    expect(await sessions.find(sessionId)).toMatchObject({
      user: { id: userId, name: 'Runa Dahl' },
      memberships: [{ teamName: 'Runa Dahl’s team' }],
    });
  });

  it('does not get its password back from a later sign-up', async () => {
    const email = newAddress();
    await account.signUp({ name: 'Mallory', email, password });
    await arriveWell(claims({ email }));
    await account.signUp({ name: 'Mallory', email, password });
    expect((await findUser(email))?.passwordHash).toBeNull();
    await waitForLetter(lettersUrl, email, 'Your account has no password');
  });
});

describe('the subject decides', () => {
  it('and a changed address at the provider moves nobody to another account', async () => {
    const [mine, theirs] = [await newPerson(), await newPerson()];
    const told = claims({ email: mine.email });
    await arriveWell(told);
    const outcome = await arriveWell({ ...told, email: theirs.email });
    expect(outcome.userId).toBe(mine.userId);
    expect(await findUser(mine.email)).toMatchObject({ id: mine.userId });
    expect(await db.$count(identityRows, eq(identityRows.userId, theirs.userId))).toBe(0);
  });

  it('also when the address is not verified any more', async () => {
    const told = claims({ email: newAddress() });
    const { userId } = await arriveWell(told);
    const later = { ...told, email: undefined, email_verified: undefined };
    expect(await arriveWell(later)).toMatchObject({ userId });
  });

  // 6.8.1: the same name at another provider is somebody else.
  it('together with the issuer', async () => {
    const told = claims({ email: newAddress() });
    const first = await arriveWell(told);
    const other = { ...told, iss: 'https://other.example', email: newAddress() };
    expect((await arriveWell(other)).userId).not.toBe(first.userId);
  });
});

describe('somebody who is signed in already', () => {
  const present = async (userId: string) => {
    const sessionId = await sessions.begin(userId, client);
    return { userId, sessionId, proof: (await sessions.find(sessionId))!.proof };
  };

  it('proves again who they are: a new session takes the place of the old, as fresh as the provider says', async () => {
    const { userId, email } = await newPerson();
    const before = await present(userId);
    const authTime = Math.floor(Date.now() / 1000) - 20 * 60;
    const told = claims({ email, auth_time: authTime });
    const outcome = await identities.signIn(told, client, before);
    expect(await sessions.find(before.sessionId)).toBeNull();
    const found = await sessions.find((outcome as { sessionId: string }).sessionId);
    expect(found?.proof).toEqual({
      method: 'single sign-on',
      withSecondFactor: false,
      provedAt: new Date(authTime * 1000),
    });
  });

  it('does not come back as somebody else, and nothing is opened or bound on the way', async () => {
    const { userId } = await newPerson();
    const before = await present(userId);
    const email = newAddress();
    const outcome = await identities.signIn(claims({ email }), client, before);
    expect(outcome).toEqual({ fault: 'other person' });
    expect(await findUser(email)).toBeUndefined();
    expect(await sessions.find(before.sessionId)).not.toBeNull();
  });
});

describe('what the provider says about how', () => {
  it.each([
    [undefined, false],
    [['pwd'], false],
    [['otp'], false],
    [['pwd', 'otp', 'mfa'], true],
  ])('%j counts as a second factor: %s', (amr, isOne) => {
    expect(identities.proofOf(claims({ amr })).withSecondFactor).toBe(isOne);
  });

  it('never makes a proof younger than this moment', () => {
    const ahead = Math.floor(Date.now() / 1000) + 3600;
    const { provedAt } = identities.proofOf(claims({ auth_time: ahead }));
    expect(provedAt!.getTime()).toBeLessThanOrEqual(Date.now());
  });
});

describe('an account without a password', () => {
  it('gets none by letter while the provider is there', async () => {
    const email = newAddress();
    await arriveWell(claims({ email }));
    account.forgotPassword(email);
    await waitForLetter(lettersUrl, email, 'Your account has no password');
    const subjects = (await lettersTo(lettersUrl, email)).map(({ subject }) => subject);
    expect(subjects).not.toContain('Choose a new password');
  });
});
