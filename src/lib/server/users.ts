/** Accounts: how a person gets one, proves who they are, and changes their password. */
import { eq, sql } from 'drizzle-orm';
import type { SignUp } from '../domain/accounts';
import type { EnergyUnit } from '../domain/energy-units';
import { findPasswordFault } from '../domain/passwords';
import { db, type Executor } from './db';
import { memberships, users } from './db/schema';
import { environment } from './environment';
import { recordAccountEvent } from './events';
import * as invitations from './invitations';
import * as letterTokens from './letter-tokens';
import {
  alreadyMemberLetter,
  confirmAddressLetter,
  noPasswordLetter,
  passwordChangedLetter,
  resetPasswordLetter,
} from './letters';
import { log } from './log';
import { post, postWithin, type Letter } from './mail';
import { openTeamWithin } from './memberships';
import { hashPassword, verifyPassword } from './passwords';
import * as sessions from './sessions';
import type { Client } from './sessions';
import * as signInSteps from './sign-in-steps';
import type { Begun } from './sign-in-steps';

export type SignInFault = 'wrong' | 'unconfirmed' | 'letter';

async function findByEmail(email: string) {
  const [user] = await db.select().from(users).where(eq(users.email, email));
  return user ?? null;
}

/**
 * Opens an account with a team of its own, or writes to the owner of the one there is. Nobody but the reader of the
 * letter learns which. An account nobody confirmed belongs to nobody yet, so the latest sign-up's name and password
 * count; they are of use only to who also holds the letter.
 */
export async function signUp({ name, email, password }: SignUp): Promise<void> {
  const passwordHash = await hashPassword(password);
  await db.transaction(async (tx) => {
    const send = (letter: Letter) => postWithin(tx, email, letter);
    const [opened] = await tx
      .insert(users)
      .values({ name, email, passwordHash })
      .onConflictDoUpdate({
        target: users.email,
        set: { name, passwordHash },
        setWhere: sql`${users.confirmedAt} is null`,
      })
      .returning({ id: users.id });
    if (!opened) return send(letterToOwner((await findByEmail(email))!));
    await openOwnTeam(tx, opened.id, name);
    await recordAccountEvent(tx, opened.id, 'signed up');
    const token = await letterTokens.issue(tx, opened.id, 'confirm-address');
    return send(confirmAddressLetter(name, token));
  });
}

/** True when the account is opened through the identity provider, which is there, and in no other way. */
const signsInElsewhere = ({ passwordHash }: { passwordHash: string | null }) =>
  passwordHash === null && environment.WINDLASS_OIDC_ISSUER !== undefined;

const letterToOwner = (owner: { name: string; passwordHash: string | null }): Letter =>
  signsInElsewhere(owner)
    ? noPasswordLetter(owner.name, environment.WINDLASS_OIDC_NAME)
    : alreadyMemberLetter(owner.name);

/** Gives a person without a team one of their own, which they lead. */
export async function openOwnTeam(executor: Executor, userId: string, name: string): Promise<void> {
  const present = await executor
    .select({ teamId: memberships.teamId })
    .from(memberships)
    .where(eq(memberships.userId, userId))
    .limit(1);
  if (present.length > 0) return;
  await openTeamWithin(executor, { userId }, `${name}’s team`);
}

/**
 * Opens an account for the holder of an invitation's letter, which proves the address, and makes it a member.
 * @returns the team, or null when the invitation does not work (any more) or the address has a confirmed account
 */
export async function signUpByInvitation(
  given: { readonly token: string; readonly name: string; readonly password: string },
  address: string,
): Promise<string | null> {
  const invitation = await invitations.find(given.token);
  if (!invitation) return null;
  const passwordHash = await hashPassword(given.password);
  const { name } = given;
  return db.transaction(async (tx) => {
    const [opened] = await tx
      .insert(users)
      .values({ name, email: invitation.email, passwordHash, confirmedAt: sql`now()` })
      .onConflictDoUpdate({
        target: users.email,
        set: { name, passwordHash, confirmedAt: sql`now()` },
        setWhere: sql`${users.confirmedAt} is null`,
      })
      .returning({ id: users.id });
    if (!opened) return null;
    await letterTokens.revoke(tx, opened.id, 'confirm-address');
    await recordAccountEvent(tx, opened.id, 'signed up');
    const person = { userId: opened.id, email: invitation.email, address };
    return invitations.take(tx, person, given.token);
  });
}

/** True when the address has an account that somebody confirmed. */
export async function hasAccount(email: string): Promise<boolean> {
  const user = await findByEmail(email);
  return user !== null && user.confirmedAt !== null;
}

/**
 * Checks address and password and begins a session, or the step of the second factor; with the secret of a letter it
 * first confirms the address.
 * @returns what was begun, or why there is none: 'unconfirmed' is only told to who knows the password
 */
export async function signIn(
  given: { email: string; password: string; confirmToken?: string },
  client: Client,
): Promise<Begun | { fault: SignInFault }> {
  const user = await findByEmail(given.email);
  const isRight = await verifyPassword(user?.passwordHash ?? null, given.password);
  if (!user || !isRight) return { fault: 'wrong' };
  if (given.confirmToken !== undefined) {
    if (!(await confirmAddress(user.id, given.confirmToken))) return { fault: 'letter' };
  } else if (!user.confirmedAt) {
    return { fault: 'unconfirmed' };
  }
  return signInSteps.proceed(user.id, sessions.byPassword(), client);
}

async function confirmAddress(userId: string, token: string): Promise<boolean> {
  const owner = await letterTokens.findOwner(token, 'confirm-address');
  if (owner?.id !== userId) return false;
  return db.transaction(async (tx) => {
    if ((await letterTokens.redeem(tx, token, 'confirm-address')) === null) return false;
    await tx
      .update(users)
      .set({ confirmedAt: sql`now()` })
      .where(eq(users.id, userId));
    await recordAccountEvent(tx, userId, 'confirmed address');
    return true;
  });
}

/** Runs after the answer went out, so that its time tells nothing about the address. */
function later(task: () => Promise<void>): void {
  setImmediate(() => {
    task().catch((error: unknown) => log.error({ error }, 'A letter could not be written'));
  });
}

/** Sends the confirmation letter once more, if there is an account that waits for it. */
export function resendConfirmation(email: string): void {
  later(async () => {
    const user = await findByEmail(email);
    if (!user || user.confirmedAt) return;
    await db.transaction(async (tx) => {
      const token = await letterTokens.issue(tx, user.id, 'confirm-address');
      await postWithin(tx, email, confirmAddressLetter(user.name, token));
    });
  });
}

/**
 * Sends a letter with which the owner of the address can choose a new password, if there is an account. One that is
 * opened by single sign-on gets no password by letter: that would be a way around the provider and its rules. Where the
 * operator took the provider away, a letter is the only way back in.
 */
export function forgotPassword(email: string): void {
  later(async () => {
    const user = await findByEmail(email);
    if (!user) return;
    if (signsInElsewhere(user)) return post(email, letterToOwner(user));
    await db.transaction(async (tx) => {
      const token = await letterTokens.issue(tx, user.id, 'reset-password');
      await postWithin(tx, email, resetPasswordLetter(user.name, token));
    });
  });
}

/**
 * Sets a new password by a letter's secret, and ends every sign-in.
 * @returns 'letter' when the secret does not work (any more); a fault when the password will not do
 */
export async function resetPassword(
  token: string,
  password: string,
): Promise<'done' | 'letter' | { fault: string }> {
  const owner = await letterTokens.findOwner(token, 'reset-password');
  if (!owner) return 'letter';
  const fault = findPasswordFault(password, [owner.name, owner.email]);
  if (fault) return { fault };
  const passwordHash = await hashPassword(password);
  const isDone = await db.transaction(async (tx) => {
    if ((await letterTokens.redeem(tx, token, 'reset-password')) === null) return false;
    // Who reads the letter owns the address, so it counts as confirmed.
    await tx
      .update(users)
      .set({ passwordHash, confirmedAt: sql`coalesce(${users.confirmedAt}, now())` })
      .where(eq(users.id, owner.id));
    await sessions.revokeAll(tx, owner.id);
    await signInSteps.endAll(tx, owner.id);
    await letterTokens.revoke(tx, owner.id, 'confirm-address');
    await recordAccountEvent(tx, owner.id, 'reset password');
    await postWithin(tx, owner.email, passwordChangedLetter(owner.name));
    return true;
  });
  return isDone ? 'done' : 'letter';
}

export type PasswordChangeFault = {
  readonly field: 'current' | 'password';
  readonly message: string;
};

/** Changes a password for who knows the present one, and ends all sign-ins but the present one. */
export async function changePassword(
  who: { userId: string; sessionId: string },
  given: { current: string; password: string },
): Promise<PasswordChangeFault | null> {
  const [user] = await db.select().from(users).where(eq(users.id, who.userId));
  if (!user || !(await verifyPassword(user.passwordHash, given.current))) {
    return { field: 'current', message: 'This is not your present password.' };
  }
  const fault = findPasswordFault(given.password, [user.name, user.email]);
  if (fault) return { field: 'password', message: fault };
  const passwordHash = await hashPassword(given.password);
  await db.transaction(async (tx) => {
    await tx.update(users).set({ passwordHash }).where(eq(users.id, user.id));
    await sessions.revokeAll(tx, user.id, who.sessionId);
    await signInSteps.endAll(tx, user.id);
    await letterTokens.revoke(tx, user.id, 'reset-password');
    await recordAccountEvent(tx, user.id, 'changed password');
    await postWithin(tx, user.email, passwordChangedLetter(user.name));
  });
  return null;
}

/** Remembers in which unit a person reads energies. */
export async function chooseUnit(userId: string, energyUnit: EnergyUnit): Promise<void> {
  await db.update(users).set({ energyUnit }).where(eq(users.id, userId));
}

/** Changes the name that others see. */
export async function rename(userId: string, name: string): Promise<void> {
  await db.update(users).set({ name }).where(eq(users.id, userId));
}
