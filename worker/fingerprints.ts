/** Writes the fingerprints of molecules that have none yet, beside the tasks, for as long as the worker runs. */
import { setTimeout as pause } from 'node:timers/promises';
import { fillFingerprints } from '../src/lib/server/fingerprints';
import { log } from '../src/lib/server/log';

const AT_ONCE = 25;
const PAUSE_MS = 3_000;

/** Runs until the signal comes; a database that is away is asked again later. */
export async function keepFingerprints(signal: AbortSignal): Promise<void> {
  while (!signal.aborted) {
    const written = await fillFingerprints(AT_ONCE).catch((error: unknown) => {
      if (!signal.aborted) log.warn({ error }, 'Fingerprints could not be written; tried again');
      return 0;
    });
    if (written < AT_ONCE) await pause(PAUSE_MS, undefined, { signal }).catch(() => undefined);
  }
}
