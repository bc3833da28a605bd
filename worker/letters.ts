/** Sees to letters that no request and no task causes: about batches that ended, daily ones, and those that got stuck. */
import { setTimeout as pause } from 'node:timers/promises';
import { tellOfFinished } from '../src/lib/server/batch-letters';
import { settle } from '../src/lib/server/letter-delivery';
import { log } from '../src/lib/server/log';

const PAUSE_MS = 5_000;

/** Runs until the signal comes; any number of workers may do it. */
export async function keepLetters(signal: AbortSignal): Promise<void> {
  while (!signal.aborted) {
    for (const look of [tellOfFinished, settle]) {
      await look().catch((error: unknown) => {
        if (!signal.aborted) log.warn({ error }, 'Letters could not be seen to; it is tried again');
      });
    }
    await pause(PAUSE_MS, undefined, { signal }).catch(() => undefined);
  }
}
