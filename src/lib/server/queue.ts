/**
 * The queue of tasks on pg-boss, in the same database as everything else. A job only names a task; what people are
 * shown is the task's own row.
 */
import { sql } from 'drizzle-orm';
import { fromDrizzle, PgBoss, type JobWithMetadata } from 'pg-boss';
import type { ProgramName } from '../domain/second-opinions';
import type { Executor } from './db';
import { environment } from './environment';
import { log } from './log';

const TASKS = 'tasks';
/** Tasks of external programs wait apart, since only workers that have the program take them. */
const PROGRAM_TASKS = { xtb: 'xtb-tasks', mopac: 'mopac-tasks' } as const;
const QUEUES = [TASKS, ...Object.values(PROGRAM_TASKS)];

/** Without a sign of life for this long a worker counts as dead, and pg-boss hands its job to another one. */
const HEARTBEAT_SECONDS = 15;
/** How often lost jobs are looked for; with the heartbeat it keeps the pick-up within a minute. */
const SUPERVISE_SECONDS = 10;
/** Machines fail, molecules do not: a job is only ever thrown back by a fault of the machine. */
const RETRY_LIMIT = 5;

export interface TaskJob {
  readonly taskId: string;
}

/** A task's place in the order of the queue: jobs with a higher priority run first. */
export interface QueuedTask {
  readonly id: string;
  readonly priority: number;
  /** The external program that performs it; none for the engine's own tasks. */
  readonly program?: ProgramName | undefined;
}

let opening: Promise<PgBoss> | null = null;

/** This process's side of the queue, opened once: the web only sends, a worker also looks after lost jobs. */
function openQueue(isWorker = false): Promise<PgBoss> {
  opening ??= start(isWorker).catch((error: unknown) => {
    opening = null;
    throw error;
  });
  return opening;
}

async function start(isWorker: boolean): Promise<PgBoss> {
  const boss = new PgBoss({
    connectionString: environment.DATABASE_URL,
    instanceName: isWorker ? 'worker' : 'web',
    max: isWorker ? 4 : 2,
    supervise: isWorker,
    schedule: false,
    useListenNotify: isWorker,
    superviseIntervalSeconds: SUPERVISE_SECONDS,
    monitorIntervalSeconds: SUPERVISE_SECONDS,
  });
  boss.on('error', (error) => log.warn({ error }, 'The queue lost the database for a moment'));
  await boss.start();
  for (const queue of QUEUES) {
    await boss.createQueue(queue, {
      notify: true,
      heartbeatSeconds: HEARTBEAT_SECONDS,
      expireInSeconds: environment.WINDLASS_TASK_SECONDS + 120,
      retryLimit: RETRY_LIMIT,
      retryBackoff: true,
      retryDelay: 1,
      retryDelayMax: 30,
    });
  }
  return boss;
}

/** Ends this process's side of the queue; running jobs are left for another worker. */
export async function stopQueue(): Promise<void> {
  const boss = await opening?.catch(() => null);
  opening = null;
  await boss?.stop({ graceful: false });
}

/** Puts tasks into the queue as a part of the caller's transaction: rolled back, no job is left behind. */
export async function enqueue(executor: Executor, tasks: readonly QueuedTask[]): Promise<void> {
  const boss = await openQueue();
  for (const queue of QUEUES) {
    const jobs = tasks
      .filter(({ program }) => queue === queueOf(program))
      .map(({ id, priority }) => ({ id, priority, data: { taskId: id } satisfies TaskJob }));
    if (jobs.length > 0) await boss.insert(queue, jobs, { db: fromDrizzle(executor, sql) });
  }
}

function queueOf(program: ProgramName | undefined): string {
  return program === undefined ? TASKS : PROGRAM_TASKS[program];
}

/** Takes tasks out of the queue as a part of the caller's transaction. */
export async function dequeue(executor: Executor, ids: readonly string[]): Promise<void> {
  if (ids.length === 0) return;
  const boss = await openQueue();
  for (const queue of QUEUES) {
    await boss.deleteJob(queue, [...ids], { db: fromDrizzle(executor, sql) });
  }
}

/**
 * Runs `handle` for every job, `concurrency` at a time: those of the engine, or those of an external program. A handler
 * that throws hands its job back for a later try.
 */
export async function workOnTasks(
  concurrency: number,
  handle: (taskId: string, lastTry: boolean) => Promise<void>,
  program?: ProgramName,
): Promise<void> {
  const boss = await openQueue(true);
  await boss.work(
    queueOf(program),
    {
      includeMetadata: true,
      localConcurrency: concurrency,
      batchSize: 1,
      pollingIntervalSeconds: 2,
      notifyPollingIntervalSeconds: 5,
    },
    async (jobs: JobWithMetadata<TaskJob>[]) => {
      for (const { data, retryCount, retryLimit } of jobs) {
        await handle(data.taskId, retryCount >= retryLimit);
      }
    },
  );
}
