/**
 * Letters are put into the queue here; workers hand them to the mail server (letter-delivery.ts). A letter that is in
 * the table arrives whether the process that wrote it lives on or not.
 */
import { sql } from 'drizzle-orm';
import { setTimeout as wait } from 'node:timers/promises';
import { db, type Executor } from './db';
import { letters } from './db/schema';
import { log } from './log';
import { enqueueLetter } from './queue';

export interface Letter {
  readonly subject: string;
  readonly text: string;
  readonly html: string;
  /** How long it is worth reading, where that is shorter than the time that a delivery is tried for. */
  readonly hours?: number | undefined;
}

/** A delivery is tried for this long, hours. */
const DELIVERY_HOURS = 48;

/**
 * Sends a letter as a part of the caller's transaction: rolled back, none goes out. `about` names what it announces,
 * for those who later ask whether it arrived (`wasDelivered`).
 */
export async function postWithin(
  executor: Executor,
  to: string,
  { subject, text, html, hours = DELIVERY_HOURS }: Letter,
  about?: string,
): Promise<void> {
  const [{ id }] = await executor
    .insert(letters)
    .values({
      address: to,
      subject,
      text,
      html,
      about,
      expiresAt: sql`now() + make_interval(hours => ${Math.min(hours, DELIVERY_HOURS)})`,
    })
    .returning({ id: letters.id });
  await enqueueLetter(executor, id);
}

const beingStored = new Set<Promise<void>>();

/**
 * Sends a letter without making the caller wait: how long an answer takes must not tell whether a letter went out.
 * Where a transaction is at hand, `postWithin` is better: this one stores the letter a moment later.
 */
export function post(to: string, letter: Letter): void {
  const storing = db
    .transaction((transaction) => postWithin(transaction, to, letter))
    .catch((error: unknown) =>
      log.error({ error, subject: letter.subject }, 'A letter could not be put into the queue'),
    )
    .finally(() => beingStored.delete(storing));
  beingStored.add(storing);
}

/** Waits until the letters that were posted are in the queue. */
export async function closeMail(): Promise<void> {
  await Promise.race([Promise.allSettled([...beingStored]), wait(2_000)]);
}
