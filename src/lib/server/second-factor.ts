/** Second factors: switching them on and off, and checking a code so that it counts once. */
import { and, eq, isNotNull, isNull, lt, sql } from 'drizzle-orm';
import { Secret, TOTP } from 'otpauth';
import { CODE_DIGITS } from '../domain/second-factor';
import { db, type Executor } from './db';
import { secondFactors, users } from './db/schema';
import { recordAccountEvent } from './events';
import {
  recoveryCodeUsedLetter,
  secondFactorOffLetter,
  secondFactorOnLetter,
  wrongCodesLetter,
} from './letters';
import { log } from './log';
import { post, type Letter } from './mail';
import { clientNetwork, limitRate, takeFrom } from './rate-limits';
import * as recoveryCodes from './recovery-codes';
import { seal, unseal } from './sealing';
import * as sessions from './sessions';

/** RFC 6238 recommends 30 s and one step either way for clocks that disagree; 160 bits as RFC 4226 recommends. */
const PERIOD_SECONDS = 30;
const SKEW_STEPS = 1;
const SECRET_BYTES = 20;
/** A secret that nobody gave a code of for so long is not offered again: who knows who saw it. */
const SETUP_MINUTES = 30;
const PURPOSE = 'second factor';

const codesOf = (secret: string, label = '') =>
  new TOTP({ issuer: 'Windlass', label, secret, digits: CODE_DIGITS, period: PERIOD_SECONDS });

const isOf = (userId: string) => eq(secondFactors.userId, userId);
const isConfirmed = isNotNull(secondFactors.confirmedAt);

/** True when the person has switched a second factor on. */
export async function isOn(userId: string, executor: Executor = db): Promise<boolean> {
  return (await executor.$count(secondFactors, and(isOf(userId), isConfirmed))) > 0;
}

/** What an app needs to make codes, while the second factor waits for the first one; null when it is on already. */
export async function setUp(person: {
  readonly id: string;
  readonly email: string;
}): Promise<{ secret: string; uri: string } | null> {
  const fresh = new Secret({ size: SECRET_BYTES }).base32;
  // A page that is opened twice shows one secret, whichever of its codes is typed.
  await db
    .insert(secondFactors)
    .values({ userId: person.id, secret: seal(fresh, PURPOSE, person.id) })
    .onConflictDoUpdate({
      target: secondFactors.userId,
      set: { secret: seal(fresh, PURPOSE, person.id), createdAt: sql`now()` },
      setWhere: sql`${secondFactors.confirmedAt} is null
        and ${secondFactors.createdAt} < now() - make_interval(mins => ${SETUP_MINUTES})`,
    });
  const [waiting] = await db
    .select({ secret: secondFactors.secret })
    .from(secondFactors)
    .where(and(isOf(person.id), isNull(secondFactors.confirmedAt)));
  if (!waiting) return null;
  const secret = unseal(waiting.secret, PURPOSE, person.id);
  return { secret, uri: codesOf(secret, person.email).toString() };
}

/** The time step that a code belongs to, now or one step off; null for a wrong one. */
function findStep(secret: string | null, code: string): number | null {
  if (secret === null) return null;
  const now = Date.now();
  const offset = codesOf(secret).validate({ token: code, timestamp: now, window: SKEW_STEPS });
  return offset === null ? null : Math.floor(now / 1000 / PERIOD_SECONDS) + offset;
}

/** The secret; null when AUTH_SECRET is not the one it was sealed under: then only recovery codes help. */
function readSecret(sealed: string, userId: string): string | null {
  try {
    return unseal(sealed, PURPOSE, userId);
  } catch (error) {
    log.error({ error, userId }, 'A second factor cannot be read; was AUTH_SECRET changed?');
    return null;
  }
}

/** Takes a code of the app: it counts once, and none before it counts any more. */
async function takeAppCode(executor: Executor, userId: string, code: string): Promise<boolean> {
  const [factor] = await executor
    .select({ secret: secondFactors.secret })
    .from(secondFactors)
    .where(isOf(userId));
  const step = factor ? findStep(readSecret(factor.secret, userId), code) : null;
  if (step === null) return false;
  const taken = await executor
    .update(secondFactors)
    .set({ lastStep: step })
    .where(and(isOf(userId), lt(secondFactors.lastStep, step)))
    .returning({ userId: secondFactors.userId });
  return taken.length > 0;
}

/** Seconds to wait before another code may be tried; tells the owner by letter when many were wrong. */
export async function limitCodes(userId: string, address: string): Promise<number | null> {
  const wait = await limitRate(
    ['code of an account', userId],
    ['code from a client', clientNetwork(address)],
  );
  if (wait === null) return null;
  const isFirst = (await takeFrom(['letter about wrong codes', userId])).wait === null;
  if (isFirst) await write(db, userId, wrongCodesLetter);
  return wait;
}

/** Checks a code of the app or a recovery code of who has the second factor on, and uses it up. */
export async function takeCode(executor: Executor, userId: string, code: string): Promise<boolean> {
  if (!(await isOn(userId, executor))) return false;
  if (code.length === CODE_DIGITS) return takeAppCode(executor, userId, code);
  if (!(await recoveryCodes.redeem(executor, userId, code))) return false;
  await recordAccountEvent(executor, userId, 'used recovery code');
  const left = await recoveryCodes.count(userId, executor);
  await write(executor, userId, (name) => recoveryCodeUsedLetter(name, left));
  return true;
}

/**
 * Switches the second factor on when the code is right; the present sign-in counts as one with it, all others end.
 * @returns the recovery codes, which are told only now; null when the code is wrong or it is on already
 */
export async function switchOn(
  who: { readonly userId: string; readonly sessionId: string },
  code: string,
): Promise<string[] | null> {
  const codes = await db.transaction(async (tx) => {
    if ((await isOn(who.userId, tx)) || !(await takeAppCode(tx, who.userId, code))) return null;
    const confirmed = await tx
      .update(secondFactors)
      .set({ confirmedAt: sql`now()` })
      .where(and(isOf(who.userId), isNull(secondFactors.confirmedAt)))
      .returning({ userId: secondFactors.userId });
    if (confirmed.length === 0) return null;
    await sessions.revokeAll(tx, who.userId, who.sessionId);
    await sessions.noteSecondFactor(tx, who.sessionId);
    await recordAccountEvent(tx, who.userId, 'switched second factor on');
    return recoveryCodes.replace(tx, who.userId);
  });
  if (codes) await write(db, who.userId, secondFactorOnLetter);
  return codes;
}

/** Makes new recovery codes in place of the old; null while the second factor is off. */
export async function renewRecoveryCodes(userId: string): Promise<string[] | null> {
  return db.transaction(async (tx) => {
    if (!(await isOn(userId, tx))) return null;
    await recordAccountEvent(tx, userId, 'made recovery codes');
    return recoveryCodes.replace(tx, userId);
  });
}

/** Switches the second factor off and ends all other sign-ins; false when it was off. */
export async function switchOff(who: {
  readonly userId: string;
  readonly sessionId: string;
}): Promise<boolean> {
  const wasOn = await db.transaction(async (tx) => {
    const removed = await tx
      .delete(secondFactors)
      .where(isOf(who.userId))
      .returning({ confirmedAt: secondFactors.confirmedAt });
    if (!removed[0]?.confirmedAt) return false;
    await recoveryCodes.remove(tx, who.userId);
    await sessions.forgetSecondFactor(tx, who.userId);
    await sessions.revokeAll(tx, who.userId, who.sessionId);
    await recordAccountEvent(tx, who.userId, 'switched second factor off');
    return true;
  });
  if (wasOn) await write(db, who.userId, secondFactorOffLetter);
  return wasOn;
}

async function write(
  executor: Executor,
  userId: string,
  letterTo: (name: string) => Letter,
): Promise<void> {
  const [person] = await executor
    .select({ email: users.email, name: users.name })
    .from(users)
    .where(eq(users.id, userId));
  if (person) post(person.email, letterTo(person.name));
}
