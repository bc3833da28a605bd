/** The worker: takes tasks from the queue and performs them until it is told to stop. */
import { randomUUID } from 'node:crypto';
import { hostname } from 'node:os';
import { programNames } from '../src/lib/domain/second-opinions';
import { ENGINE_VERSION } from '../src/lib/engine';
import { closeDatabase } from '../src/lib/server/db';
import { environment } from '../src/lib/server/environment';
import { log } from '../src/lib/server/log';
import { closeDelivery, deliver } from '../src/lib/server/letter-delivery';
import { closeMail } from '../src/lib/server/mail';
import { watchProcess } from '../src/lib/server/metrics';
import { stopQueue, workOnLetters, workOnTasks } from '../src/lib/server/queue';
import { joinSlots } from '../src/lib/server/task-slots';
import { failAbandoned } from '../src/lib/server/tasks';
import { requeueStranded } from '../src/lib/server/webhook-log';
import { deliverWebhooks } from './deliveries';
import { keepLetters } from './letters';
import { keepFingerprints } from './fingerprints';
import { findInstalled, versionsOf } from './installed-programs';
import { showLife } from './life';
import { hearCancels, performTask } from './perform';
import { closePool, concurrency } from './pool';

/** How often tasks and deliveries are looked for whose workers all died. */
const ABANDONED_CHECK_MS = 60_000;

const name = `${hostname()} ${process.pid} ${randomUUID().slice(0, 4)}`;
watchProcess({ worker: name });

await hearCancels();
const installed = await findInstalled();
const slots = [
  await workOnTasks(concurrency, (taskId, lastTry) => performTask(taskId, name, lastTry)),
];
for (const program of programNames) {
  if (!installed[program]) continue;
  // As many as cores, since they give way to the computing threads (programs/run-program.ts).
  slots.push(
    await workOnTasks(
      concurrency,
      (taskId, lastTry) => performTask(taskId, name, lastTry, installed),
      program,
    ),
  );
}
const stopDelivering = await deliverWebhooks();
const doesChores = environment.WINDLASS_WORKER_CHORES === 'on';
if (doesChores) await workOnLetters(deliver);
const check = setInterval(() => {
  Promise.all([failAbandoned(), requeueStranded()]).catch((error: unknown) =>
    log.warn({ error }, 'Looking for what was abandoned failed; it is tried again'),
  );
}, ABANDONED_CHECK_MS);
const ending = new AbortController();
void keepFingerprints(ending.signal);
if (doesChores) void keepLetters(ending.signal);
const leave = await showLife(
  { name, version: ENGINE_VERSION, concurrency, programs: versionsOf(installed) },
  joinSlots(slots),
  endDrained,
);
log.info({ worker: name, concurrency }, 'The worker takes tasks');

/** Ends at once: what was running is picked up by another worker, or by this one when it is back. */
async function stop(): Promise<void> {
  clearInterval(check);
  ending.abort();
  await Promise.all([closePool(), closeDelivery()]);
  await leave();
  await stopQueue();
  await closeMail();
  await closeDatabase();
}

/** Ends once nothing runs any more, with exit code 0: supervisors leave it down. */
async function endDrained(): Promise<void> {
  await stopDelivering();
  await stop();
}

for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => void stop());
