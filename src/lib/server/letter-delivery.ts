/**
 * What workers do with letters: each is handed to the mail server once. A worker claims a letter, and marks it when the
 * server is ready for the body, before the first byte goes out. Dies the worker before, another one takes over; the
 * mark fails for whoever was slower, so that no two hand in the same letter. Dies it after, nobody can know whether the
 * server took the letter: it stays 'handing-in' and becomes 'unsure', which is never sent again. That window, from the
 * body's first byte to the mark of its end, cannot be closed, because no mail server takes part in our transactions.
 */
import { and, asc, count, desc, eq, inArray, isNotNull, isNull, lt, sql } from 'drizzle-orm';
import { setTimeout as wait } from 'node:timers/promises';
import { db } from './db';
import { letters } from './db/schema';
import { log } from './log';
import { countLetter } from './metrics';
import { handIn } from './smtp';

/** After this long no answer of the mail server will come any more. */
const LOST = sql`now() - interval '3 minutes'`;
/** How long the fate of a letter is kept. */
const KEPT = sql`now() - interval '90 days'`;
/** Marking a letter as sent is worth some patience: until it is done, it counts as perhaps sent. */
const MARK_TRIES = 20;
const MARK_PAUSE_MS = 500;

type LetterState = (typeof letters.$inferSelect)['state'];
/** How a letter can end without a doubtless delivery. */
const failures = ['unsure', 'given-up', 'expired'] as const satisfies readonly LetterState[];

/** Raised when a letter could not be handed in now; the queue tries it again. */
export class NotNow extends Error {}
/** Raised when another worker took the letter over meanwhile. */
class TakenOver extends Error {}

const underWay = new Set<Promise<unknown>>();
let isClosing = false;

/** Delivers a letter unless it has ended already. Throws `NotNow` where it has to be tried again. */
export async function deliver(letterId: string): Promise<void> {
  if (isClosing) throw new NotNow('The worker is ending');
  const delivery = attempt(letterId);
  underWay.add(delivery);
  try {
    await delivery;
  } finally {
    underWay.delete(delivery);
  }
}

/** Lets the deliveries that are under way end; no further one begins in this process. */
export async function closeDelivery(): Promise<void> {
  isClosing = true;
  await Promise.race([Promise.allSettled([...underWay]), wait(5_000)]);
}

interface Claimed {
  readonly id: string;
  readonly attempt: number;
}

async function attempt(letterId: string): Promise<void> {
  const letter = await claim(letterId);
  if (!letter) return;
  const { id, address: to, subject, text, html } = letter;
  const result = await handIn({ id, to, subject, text: text!, html: html! }, () =>
    markHandingIn(letter),
  ).catch((error: unknown) => {
    if (error instanceof TakenOver) return null;
    throw error;
  });
  if (result === null) return;
  switch (result.outcome) {
    case 'sent':
      return endSurely(letter);
    case 'refused':
      return end(letter, 'given-up', result.reason);
    case 'unsure':
      return end(letter, 'unsure', result.reason);
    case 'not now':
      await putBack(letter, result.reason);
      throw new NotNow(result.reason);
  }
}

/** Takes a letter whose body has not gone out. One that a dead worker held is taken over. */
async function claim(letterId: string) {
  await expire();
  const [claimed] = await db
    .update(letters)
    .set({ state: 'claimed', attempt: sql`${letters.attempt} + 1`, claimedAt: sql`now()` })
    .where(and(eq(letters.id, letterId), inArray(letters.state, ['waiting', 'claimed'])))
    .returning();
  return claimed ?? null;
}

const held = ({ id, attempt: number }: Claimed, state: LetterState) =>
  and(eq(letters.id, id), eq(letters.attempt, number), eq(letters.state, state));

async function markHandingIn(letter: Claimed): Promise<void> {
  const marked = await db
    .update(letters)
    .set({ state: 'handing-in', claimedAt: sql`now()` })
    .where(and(held(letter, 'claimed'), sql`${letters.expiresAt} > now()`))
    .returning({ id: letters.id });
  if (marked.length === 0) throw new TakenOver();
}

const ended = (state: LetterState, reason: string | null) => ({
  state,
  reason,
  text: null,
  html: null,
  endedAt: sql`now()`,
});

async function end(letter: Claimed, state: 'sent' | 'given-up' | 'unsure', reason: string | null) {
  const marked = await db
    .update(letters)
    .set(ended(state, reason))
    .where(
      and(eq(letters.id, letter.id), eq(letters.attempt, letter.attempt), isNull(letters.endedAt)),
    )
    .returning({ id: letters.id });
  if (marked.length > 0) countLetter(state);
  if (state !== 'sent') log.error({ letter: letter.id, state, reason }, 'A letter did not arrive');
}

/** Marks a letter as sent, with patience where the database is away. */
async function endSurely(letter: Claimed): Promise<void> {
  for (let tries = 1; ; tries += 1) {
    try {
      return await end(letter, 'sent', null);
    } catch (error) {
      if (tries === MARK_TRIES) throw error;
      await wait(MARK_PAUSE_MS);
    }
  }
}

async function putBack(letter: Claimed, reason: string): Promise<void> {
  log.warn({ letter: letter.id, reason }, 'A letter could not be handed in; it is tried again');
  await db
    .update(letters)
    .set({ state: 'waiting', reason })
    .where(
      and(
        eq(letters.id, letter.id),
        eq(letters.attempt, letter.attempt),
        inArray(letters.state, ['claimed', 'handing-in']),
      ),
    );
}

/** Ends letters that nobody could use any more. */
async function expire(): Promise<void> {
  await db
    .update(letters)
    .set({ ...ended('expired', null), reason: letters.reason })
    .where(
      and(
        isNull(letters.endedAt),
        inArray(letters.state, ['waiting', 'claimed']),
        lt(letters.expiresAt, sql`now()`),
      ),
    );
}

/** Ends what nobody will end any more, and forgets what ended long ago. */
export async function settle(): Promise<void> {
  await expire();
  await db
    .update(letters)
    .set(ended('unsure', 'The worker ended while it handed the letter in; it may have arrived.'))
    .where(and(eq(letters.state, 'handing-in'), lt(letters.claimedAt, LOST)));
  await db.delete(letters).where(and(isNotNull(letters.endedAt), lt(letters.endedAt, KEPT)));
}

/** Delivers every letter that waits, one after the other: for where no worker runs. Answers how many were tried. */
export async function deliverWaiting(): Promise<number> {
  const waiting = await db
    .select({ id: letters.id })
    .from(letters)
    .where(eq(letters.state, 'waiting'))
    .orderBy(asc(letters.createdAt));
  for (const { id } of waiting) {
    await deliver(id).catch((error: unknown) => {
      if (!(error instanceof NotNow)) throw error;
    });
  }
  return waiting.length;
}

/** True when a letter about something was handed in, as far as can be known. */
export async function wasDelivered(about: string): Promise<boolean> {
  const [found] = await db
    .select({ id: letters.id })
    .from(letters)
    .where(and(eq(letters.about, about), inArray(letters.state, ['sent', 'unsure'])))
    .limit(1);
  return found !== undefined;
}

/** What an operator has to know: how many letters are in each state, and the latest that did not surely arrive. */
export async function report(shown = 50) {
  const states = await db
    .select({ state: letters.state, letters: count() })
    .from(letters)
    .groupBy(letters.state);
  const counts: Record<LetterState, number> = {
    waiting: 0,
    claimed: 0,
    'handing-in': 0,
    sent: 0,
    unsure: 0,
    'given-up': 0,
    expired: 0,
  };
  for (const { state, letters: number } of states) counts[state] = number;
  const failed = await db
    .select({
      id: letters.id,
      state: sql<(typeof failures)[number]>`${letters.state}`,
      reason: letters.reason,
      attempts: letters.attempt,
      endedAt: letters.endedAt,
    })
    .from(letters)
    .where(inArray(letters.state, [...failures]))
    .orderBy(desc(letters.endedAt))
    .limit(shown);
  const [{ oldest }] = await db
    .select({ oldest: sql<Date | null>`min(${letters.createdAt})`.mapWith(letters.createdAt) })
    .from(letters)
    .where(isNull(letters.endedAt));
  return { counts, failed, oldestWaiting: oldest };
}
