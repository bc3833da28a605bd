/** The second factor against a real database; the numbers are those of OWASP ASVS 5.0.0. */
import { eq, sql } from 'drizzle-orm';
import { describe, expect, inject, it, onTestFinished, vi } from 'vitest';
import { db } from '$lib/server/db';
import { recoveryCodes, secondFactors, sessions, signInSteps } from '$lib/server/db/schema';
import { proveAgain } from '$lib/server/prove-again';
import * as factor from '$lib/server/second-factor';
import * as session from '$lib/server/sessions';
import * as steps from '$lib/server/sign-in-steps';
import * as account from '$lib/server/users';
import {
  client,
  codeOf,
  forgetUsedCodes,
  newPerson,
  newPersonWithSecondFactor,
  password,
} from '../support/accounts';
import { lettersTo, waitForLetter } from '../support/letters';

const { lettersUrl } = inject('mail');

/** The step that the right password of somebody with a second factor leads to. */
async function firstStep(email: string): Promise<string> {
  const outcome = await account.signIn({ email, password }, client);
  if (!('stepId' in outcome)) throw new Error(`No second step: ${JSON.stringify(outcome)}`);
  return outcome.stepId;
}

/** The next step's code, which nobody gave yet. */
const wrong = (secret: string) => (codeOf(secret) === '000000' ? '111111' : '000000');

describe('switching on', () => {
  it('waits for a right code, and until then changes nothing', async () => {
    const { userId, email } = await newPerson();
    const sessionId = await session.begin(userId, client);
    const { secret, uri } = (await factor.setUp({ id: userId, email }))!;
    expect(uri).toMatch(/^otpauth:\/\/totp\/Windlass:/);
    expect(await factor.setUp({ id: userId, email })).toMatchObject({ secret });
    expect(await factor.switchOn({ userId, sessionId }, wrong(secret))).toBeNull();
    expect(await account.signIn({ email, password }, client)).toHaveProperty('sessionId');
    const codes = await factor.switchOn({ userId, sessionId }, codeOf(secret));
    expect(new Set(codes).size).toBe(10);
    expect(await account.signIn({ email, password }, client)).toHaveProperty('stepId');
    await waitForLetter(lettersUrl, email, 'Your second factor is on');
  });

  // 7.4.3: other sessions end when a factor changes.
  it('ends the other sign-ins and marks the present one', async () => {
    const { userId, email } = await newPerson();
    const sessionId = await session.begin(userId, client);
    const elsewhere = await session.begin(userId, client);
    const { secret } = (await factor.setUp({ id: userId, email }))!;
    await factor.switchOn({ userId, sessionId }, codeOf(secret));
    expect(await session.find(elsewhere)).toBeNull();
    expect((await session.find(sessionId))?.proof.withSecondFactor).toBe(true);
  });

  it('happens once when tried twice at the same moment', async () => {
    const { userId, email } = await newPerson();
    const sessionId = await session.begin(userId, client);
    const { secret } = (await factor.setUp({ id: userId, email }))!;
    const both = await Promise.all(
      [0, 1].map((step) => factor.switchOn({ userId, sessionId }, codeOf(secret, step))),
    );
    expect(both.filter((codes) => codes !== null)).toHaveLength(1);
    expect(await db.$count(recoveryCodes, eq(recoveryCodes.userId, userId))).toBe(10);
  });

  it('does not offer a secret again that nobody gave a code of for half an hour', async () => {
    const { userId, email } = await newPerson();
    const first = await factor.setUp({ id: userId, email });
    await db
      .update(secondFactors)
      .set({ createdAt: sql`now() - interval '31 minutes'` })
      .where(eq(secondFactors.userId, userId));
    expect((await factor.setUp({ id: userId, email }))?.secret).not.toBe(first?.secret);
  });

  // 11.4.2, 13.3.1: neither secret nor recovery codes can be read in the database.
  it('stores nothing that a reader of the database could sign in with', async () => {
    const { userId, secret, codes } = await newPersonWithSecondFactor();
    const stored = JSON.stringify([
      await db.select().from(secondFactors).where(eq(secondFactors.userId, userId)),
      await db.select().from(recoveryCodes).where(eq(recoveryCodes.userId, userId)),
    ]);
    for (const text of [secret, ...codes]) expect(stored).not.toContain(text);
    expect(stored).toContain('$argon2id$');
  });
});

describe('signing in with a code', () => {
  it('begins a session only after the second step', async () => {
    const { userId, email, secret } = await newPersonWithSecondFactor();
    const stepId = await firstStep(email);
    expect(await session.find(stepId)).toBeNull();
    const outcome = await steps.finish(stepId, codeOf(secret), client);
    const found = await session.find((outcome as { sessionId: string }).sessionId);
    expect(found).toMatchObject({ user: { id: userId }, proof: { withSecondFactor: true } });
  });

  // 6.5.1: a code counts once.
  it('refuses a code that was used, also in another sign-in, and codes before it', async () => {
    const { email, secret } = await newPersonWithSecondFactor();
    const code = codeOf(secret);
    const before = codeOf(secret, -1);
    expect(await steps.finish(await firstStep(email), code, client)).toHaveProperty('sessionId');
    for (const old of [code, before]) {
      expect(await steps.finish(await firstStep(email), old, client)).toEqual({ fault: 'code' });
    }
  });

  it('lets only one of two sign-ins in that give the same code at the same moment', async () => {
    const { email, secret } = await newPersonWithSecondFactor();
    const both = [await firstStep(email), await firstStep(email)];
    const outcomes = await Promise.all(
      both.map((stepId) => steps.finish(stepId, codeOf(secret), client)),
    );
    expect(outcomes.filter((outcome) => 'sessionId' in outcome)).toHaveLength(1);
  });

  // 6.5.5: a code is good for its 30 s and one step of clock skew either way.
  it.each([
    [-2, false],
    [-1, true],
    [1, true],
    [2, false],
  ])('takes a clock that is %i steps off: %s', async (off, isTaken) => {
    const { email, secret } = await newPersonWithSecondFactor();
    // The middle of a step, where the clock stands still: on its edge either outcome would be right.
    vi.useFakeTimers({ toFake: ['Date'], now: Math.floor(Date.now() / 30_000) * 30_000 + 15_000 });
    onTestFinished(() => void vi.useRealTimers());
    const outcome = await steps.finish(await firstStep(email), codeOf(secret, off), client);
    expect('sessionId' in outcome).toBe(isTaken);
  });

  it('refuses a step that is over, finished, or made before the password changed', async () => {
    const { email, userId, secret } = await newPersonWithSecondFactor();
    const late = await firstStep(email);
    await db
      .update(signInSteps)
      .set({ expiresAt: sql`now() - interval '1 second'` })
      .where(eq(signInSteps.id, late));
    expect(await steps.finish(late, codeOf(secret), client)).toEqual({ fault: 'late' });

    const finished = await firstStep(email);
    expect(await steps.finish(finished, codeOf(secret), client)).toHaveProperty('sessionId');
    await forgetUsedCodes(userId);
    expect(await steps.finish(finished, codeOf(secret), client)).toEqual({ fault: 'late' });

    const old = await firstStep(email);
    const sessionId = await session.begin(userId, client);
    const change = { current: password, password: 'green anvil beside a quiet road' };
    expect(await account.changePassword({ userId, sessionId }, change)).toBeNull();
    expect(await steps.finish(old, codeOf(secret), client)).toEqual({ fault: 'late' });
  });

  // 6.3.1, 6.6.3: guessing is stopped, however many first steps are begun, and the owner is told.
  it('stops after five wrong codes, even for the right one, and writes to the owner once', async () => {
    const { email, secret } = await newPersonWithSecondFactor();
    for (let count = 0; count < 5; count += 1) {
      const outcome = await steps.finish(await firstStep(email), wrong(secret), client);
      expect(outcome).toEqual({ fault: 'code' });
    }
    for (let count = 0; count < 2; count += 1) {
      const outcome = await steps.finish(await firstStep(email), codeOf(secret), client);
      expect(outcome).toHaveProperty('wait');
    }
    await waitForLetter(lettersUrl, email, 'Wrong codes were tried');
    const letters = await lettersTo(lettersUrl, email);
    expect(letters.filter(({ subject }) => subject === 'Wrong codes were tried')).toHaveLength(1);
  });

  // 6.4.3: a new password by letter is no way around the second factor.
  it('is still asked for after the password was reset by letter', async () => {
    const { email } = await newPersonWithSecondFactor();
    account.forgotPassword(email);
    const letter = await waitForLetter(lettersUrl, email, 'Choose a new password');
    const token = /[?]token=([\w-]+)/.exec(letter.text)![1]!;
    const other = 'green anvil beside a quiet road';
    expect(await account.resetPassword(token, other)).toBe('done');
    expect(await account.signIn({ email, password: other }, client)).toHaveProperty('stepId');
  });
});

describe('recovery codes', () => {
  // 6.5.1
  it('let in once each, and tell the owner how many are left', async () => {
    const { email, codes } = await newPersonWithSecondFactor();
    const use = async (code: string) => steps.finish(await firstStep(email), code, client);
    expect(await use(codes[0]!)).toHaveProperty('sessionId');
    expect(await use(codes[0]!)).toEqual({ fault: 'code' });
    expect(await use(codes[1]!)).toHaveProperty('sessionId');
    const letter = await waitForLetter(lettersUrl, email, 'A recovery code was used', 2);
    expect(letter.text).toContain('8 are left');
  });

  it('let in only one of two who give the same at the same moment', async () => {
    const { email, codes } = await newPersonWithSecondFactor();
    const both = [await firstStep(email), await firstStep(email)];
    const outcomes = await Promise.all(
      both.map((stepId) => steps.finish(stepId, codes[0]!, client)),
    );
    expect(outcomes.filter((outcome) => 'sessionId' in outcome)).toHaveLength(1);
  });

  it('of before stop working when new ones are made', async () => {
    const { userId, email, codes } = await newPersonWithSecondFactor();
    const renewed = await factor.renewRecoveryCodes(userId);
    const use = async (code: string) => steps.finish(await firstStep(email), code, client);
    expect(await use(codes[0]!)).toEqual({ fault: 'code' });
    expect(await use(renewed![0]!)).toHaveProperty('sessionId');
  });

  it('of one person are of no use to another', async () => {
    const [mine, theirs] = [await newPersonWithSecondFactor(), await newPersonWithSecondFactor()];
    const stepId = await firstStep(mine.email);
    expect(await steps.finish(stepId, theirs.codes[0]!, client)).toEqual({ fault: 'code' });
  });
});

describe('switching off', () => {
  it('ends the other sign-ins, the codes, and what sessions had shown', async () => {
    const { userId, email, sessionId } = await newPersonWithSecondFactor();
    const elsewhere = await session.begin(userId, client);
    expect(await factor.switchOff({ userId, sessionId })).toBe(true);
    expect(await factor.switchOff({ userId, sessionId })).toBe(false);
    expect(await session.find(elsewhere)).toBeNull();
    expect((await session.find(sessionId))?.proof.withSecondFactor).toBe(false);
    expect(await db.$count(recoveryCodes, eq(recoveryCodes.userId, userId))).toBe(0);
    expect(await account.signIn({ email, password }, client)).toHaveProperty('sessionId');
    await waitForLetter(lettersUrl, email, 'Your second factor is off');
  });
});

describe('proving it again', () => {
  const shown = { method: 'password', withSecondFactor: true } as const;

  // 7.2.4, 7.5.1: a new session takes the place of the old; password and code are both asked for.
  it('needs password and code, and puts a fresh session in the place of the old', async () => {
    const { userId, sessionId, secret } = await newPersonWithSecondFactor();
    await db
      .update(sessions)
      .set({ provedAt: sql`now() - interval '1 hour'` })
      .where(eq(sessions.id, sessionId));
    const who = { userId, sessionId, shown };
    const give = (given: { password: string; code: string }) => proveAgain(who, given, client);
    expect(await give({ password: 'not this one', code: codeOf(secret) })).toEqual({
      fault: 'password',
    });
    expect(await give({ password, code: wrong(secret) })).toEqual({ fault: 'code' });
    expect(await give({ password, code: '' })).toEqual({ fault: 'code' });
    const outcome = (await give({ password, code: codeOf(secret) })) as { sessionId: string };
    expect(await session.find(sessionId)).toBeNull();
    const fresh = await session.find(outcome.sessionId);
    expect(Date.now() - fresh!.proof.provedAt!.getTime()).toBeLessThan(60_000);
    expect(fresh!.proof.withSecondFactor).toBe(true);
  });
});

describe('sessions', () => {
  // 7.3.1
  it('end when nobody used them for a week', async () => {
    const { userId } = await newPerson();
    const sessionId = await session.begin(userId, client);
    await db
      .update(sessions)
      .set({ seenAt: sql`now() - interval '8 days'` })
      .where(eq(sessions.id, sessionId));
    expect(await session.find(sessionId)).toBeNull();
    expect(await session.list(userId)).toEqual([]);
  });
});
