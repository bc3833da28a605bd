/** Sign-ins in two steps: after the first factor, either a session begins or the code of the second is asked for. */
import { and, eq, gt, lt, sql } from 'drizzle-orm';
import { db, type Executor } from './db';
import { signInSteps } from './db/schema';
import * as secondFactor from './second-factor';
import * as sessions from './sessions';
import type { Client, Proof } from './sessions';

/** How long the second step may take. */
const STEP_MINUTES = 10;

export interface BegunSession {
  readonly userId: string;
  readonly sessionId: string;
}
/** What the right first factor leads to. */
export type Begun = BegunSession | { readonly userId: string; readonly stepId: string };

/** Begins the session of who proved the first factor, or the step in which the second is asked for. */
export async function proceed(userId: string, proof: Proof, client: Client): Promise<Begun> {
  if (!(await secondFactor.isOn(userId))) {
    return { userId, sessionId: await sessions.begin(userId, client, proof) };
  }
  const [step] = await db
    .insert(signInSteps)
    .values({
      userId,
      method: proof.method,
      provedAt: proof.provedAt,
      expiresAt: sql`now() + make_interval(mins => ${STEP_MINUTES})`,
    })
    .returning({ id: signInSteps.id });
  return { userId, stepId: step!.id };
}

const isOpen = (stepId: string) =>
  and(eq(signInSteps.id, stepId), gt(signInSteps.expiresAt, sql`now()`));

/** Whose step it is; null when its time is over or it was finished. */
export async function findOwner(stepId: string): Promise<string | null> {
  const [step] = await db
    .select({ userId: signInSteps.userId })
    .from(signInSteps)
    .where(isOpen(stepId));
  return step?.userId ?? null;
}

/** Begins the session when the code is right; a step and a code each work once. */
export async function finish(
  stepId: string,
  code: string,
  client: Client,
): Promise<BegunSession | { readonly fault: 'code' | 'late' } | { readonly wait: number }> {
  const owner = await findOwner(stepId);
  if (!owner) return { fault: 'late' };
  const wait = await secondFactor.limitCodes(owner, client.address);
  if (wait !== null) return { wait };
  return db.transaction(async (tx) => {
    const [step] = await tx.select().from(signInSteps).where(isOpen(stepId)).for('update');
    if (!step) return { fault: 'late' } as const;
    if (!(await secondFactor.takeCode(tx, owner, code))) return { fault: 'code' } as const;
    await tx.delete(signInSteps).where(eq(signInSteps.id, stepId));
    const proof = { method: step.method, provedAt: step.provedAt, withSecondFactor: true };
    return { userId: owner, sessionId: await sessions.begin(owner, client, proof, tx) };
  });
}

/** Ends the steps of a person whose password changed: the first factor they showed is worth nothing now. */
export async function endAll(executor: Executor, userId: string): Promise<void> {
  await executor.delete(signInSteps).where(eq(signInSteps.userId, userId));
}

/** Forgets steps that nobody finished. */
export async function forgetExpired(): Promise<void> {
  await db.delete(signInSteps).where(lt(signInSteps.expiresAt, sql`now()`));
}
