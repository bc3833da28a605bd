/** The queue of deliveries to webhooks. A job only names a delivery and which attempt is meant. */
import { sql } from 'drizzle-orm';
import { fromDrizzle, type Job, type PgBoss } from 'pg-boss';
import type { Executor } from './db';
import { openQueue } from './queue';

const DELIVERIES = 'webhook-deliveries';
/** Without a sign of life for this long a worker counts as dead, and the attempt is made again by another one. */
const HEARTBEAT_SECONDS = 10;
/** Longer than an attempt may take. */
const EXPIRE_SECONDS = 60;
/** Only faults of the machine throw a job back: an address that does not answer gets a new job at its time. */
const RETRY_LIMIT = 10;
/** Attempts of a worker at the same time; they mostly wait. */
const AT_ONCE = 4;

export interface DeliveryJob {
  readonly deliveryId: string;
  /** How many attempts had ended when the job was made; a job that was overtaken does nothing. */
  readonly attempts: number;
}

let creating: Promise<void> | null = null;

async function openDeliveries(): Promise<PgBoss> {
  const boss = await openQueue();
  creating ??= boss
    .createQueue(DELIVERIES, {
      notify: true,
      heartbeatSeconds: HEARTBEAT_SECONDS,
      expireInSeconds: EXPIRE_SECONDS,
      retryLimit: RETRY_LIMIT,
      retryDelay: 5,
    })
    .catch((error: unknown) => {
      creating = null;
      throw error;
    });
  await creating;
  return boss;
}

/** Puts attempts into the queue as a part of the caller's transaction, due after a wait. */
export async function enqueueDeliveries(
  executor: Executor,
  jobs: readonly DeliveryJob[],
  waitSeconds = 0,
): Promise<void> {
  if (jobs.length === 0) return;
  const boss = await openDeliveries();
  await boss.insert(
    DELIVERIES,
    jobs.map((data) => ({ data, ...(waitSeconds > 0 ? { startAfter: waitSeconds } : {}) })),
    { db: fromDrizzle(executor, sql) },
  );
}

/** Carries attempts out as they fall due; answers the way to stop taking more, which waits for those under way. */
export async function workOnDeliveries(
  handle: (job: DeliveryJob) => Promise<void>,
): Promise<() => Promise<void>> {
  const boss = await openDeliveries();
  await boss.work(
    DELIVERIES,
    {
      localConcurrency: AT_ONCE,
      batchSize: 1,
      pollingIntervalSeconds: 2,
      notifyPollingIntervalSeconds: 5,
    },
    async (jobs: Job<DeliveryJob>[]) => {
      for (const { data } of jobs) await handle(data);
    },
  );
  return () => boss.offWork(DELIVERIES, { wait: true });
}
