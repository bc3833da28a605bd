/** The worker: takes tasks from the queue and performs them until it is told to stop. */
import { randomUUID } from 'node:crypto';
import { hostname } from 'node:os';
import { programNames } from '../src/lib/domain/second-opinions';
import { closeDatabase } from '../src/lib/server/db';
import { log } from '../src/lib/server/log';
import { stopQueue, workOnTasks } from '../src/lib/server/queue';
import { failAbandoned } from '../src/lib/server/tasks';
import { keepFingerprints } from './fingerprints';
import { findInstalled, keepAnnouncing } from './installed-programs';
import { hearCancels, performTask } from './perform';
import { closePool, concurrency } from './pool';

/** How often tasks are looked for whose workers all died. */
const ABANDONED_CHECK_MS = 60_000;

const name = `${hostname()} ${process.pid} ${randomUUID().slice(0, 4)}`;

await hearCancels();
await workOnTasks(concurrency, (taskId, lastTry) => performTask(taskId, name, lastTry));
const installed = await findInstalled();
for (const program of programNames) {
  if (!installed[program]) continue;
  // As many as cores, since they give way to the computing threads (programs/run-program.ts).
  await workOnTasks(
    concurrency,
    (taskId, lastTry) => performTask(taskId, name, lastTry, installed),
    program,
  );
}
const check = setInterval(() => {
  failAbandoned().catch((error: unknown) =>
    log.warn({ error }, 'Looking for abandoned tasks failed; it is tried again'),
  );
}, ABANDONED_CHECK_MS);
const ending = new AbortController();
void keepFingerprints(ending.signal);
const announcing = keepAnnouncing(name, installed, ending.signal);
log.info({ worker: name, concurrency }, 'The worker takes tasks');

/** Ends at once: what was running is picked up by another worker, or by this one when it is back. */
async function stop(): Promise<void> {
  clearInterval(check);
  ending.abort();
  await announcing;
  await closePool();
  await stopQueue();
  await closeDatabase();
}

for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => void stop());
