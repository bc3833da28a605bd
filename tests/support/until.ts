/** Waits for conditions instead of sleeping. */
import { setTimeout as wait } from 'node:timers/promises';

/** Asks again and again until there is an answer; throws when there is none in time. */
export async function until<T>(
  what: string,
  ask: () => Promise<T | null | undefined | false>,
  seconds = 50,
): Promise<T> {
  const end = Date.now() + seconds * 1000;
  for (;;) {
    const answer = await ask();
    if (answer !== null && answer !== undefined && answer !== false) return answer;
    if (Date.now() > end) throw new Error(`Waited ${seconds} s in vain: ${what}`);
    await wait(100);
  }
}
