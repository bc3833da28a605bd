/**
 * The queues of tasks and of letters on pg-boss, in the same database as everything else. A job only names a row; what
 * people are shown is the row itself.
 */
import { sql } from 'drizzle-orm';
import { fromDrizzle, PgBoss, type Job, type JobWithMetadata } from 'pg-boss';
import type { ProgramName } from '../domain/second-opinions';
import type { Executor } from './db';
import { environment } from './environment';
import { log } from './log';
import { keepSlots, type Slots } from './task-slots';

const TASKS = 'tasks';
/** Tasks of external programs wait apart, since only workers that have the program take them. */
const PROGRAM_TASKS = { xtb: 'xtb-tasks', mopac: 'mopac-tasks' } as const;
const TASK_QUEUES = [TASKS, ...Object.values(PROGRAM_TASKS)];
const LETTERS = 'letters';

/** Without a sign of life for this long a worker counts as dead, and pg-boss hands its job to another one. */
const HEARTBEAT_SECONDS = 15;
/** How often lost jobs are looked for; with the heartbeat it keeps the pick-up within a minute. */
const SUPERVISE_SECONDS = 10;
/** Machines fail, molecules do not: a job is only ever thrown back by a fault of the machine. */
const RETRY_LIMIT = 5;
/** A letter is tried until it expires, which its own row says; at this pace that is never reached before. */
const LETTER_RETRY_LIMIT = 2_000;
/** Longest wait between two tries of a letter: a mail server that is back is met again soon. */
const LETTER_RETRY_SECONDS = 300;
/** Letters that one worker hands in at once. */
const LETTERS_AT_ONCE = 2;

export interface TaskJob {
  readonly taskId: string;
}

export interface LetterJob {
  readonly letterId: string;
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
export function openQueue(isWorker = false): Promise<PgBoss> {
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
  for (const queue of TASK_QUEUES) {
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
  await boss.createQueue(LETTERS, {
    notify: true,
    heartbeatSeconds: HEARTBEAT_SECONDS,
    retryLimit: LETTER_RETRY_LIMIT,
    retryBackoff: true,
    retryDelay: 2,
    retryDelayMax: LETTER_RETRY_SECONDS,
  });
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
  for (const queue of TASK_QUEUES) {
    const jobs = tasks
      .filter(({ program }) => queue === queueOf(program))
      .map(({ id, priority }) => ({ id, priority, data: { taskId: id } satisfies TaskJob }));
    if (jobs.length > 0) await boss.insert(queue, jobs, { db: fromDrizzle(executor, sql) });
  }
}

function queueOf(program: ProgramName | undefined): string {
  return program === undefined ? TASKS : PROGRAM_TASKS[program];
}

/** Puts a letter into the queue as a part of the caller's transaction. */
export async function enqueueLetter(executor: Executor, letterId: string): Promise<void> {
  const boss = await openQueue();
  await boss.insert(LETTERS, [{ id: letterId, data: { letterId } satisfies LetterJob }], {
    db: fromDrizzle(executor, sql),
  });
}

/** Takes tasks out of the queue as a part of the caller's transaction. */
export async function dequeue(executor: Executor, ids: readonly string[]): Promise<void> {
  if (ids.length === 0) return;
  const boss = await openQueue();
  for (const queue of TASK_QUEUES) {
    await boss.deleteJob(queue, [...ids], { db: fromDrizzle(executor, sql) });
  }
}

const ONE_BY_ONE = { batchSize: 1, pollingIntervalSeconds: 2, notifyPollingIntervalSeconds: 5 };

/** Runs `handle` for every letter; a handler that throws has its letter tried again later. */
export async function workOnLetters(handle: (letterId: string) => Promise<void>): Promise<void> {
  const boss = await openQueue(true);
  await boss.work(
    LETTERS,
    { ...ONE_BY_ONE, localConcurrency: LETTERS_AT_ONCE },
    async (jobs: Job<LetterJob>[]) => {
      for (const { data } of jobs) await handle(data.letterId);
    },
  );
}

/**
 * Opens the queue as a worker: of the engine's tasks, or of those of an external program. Where its places are told to
 * take tasks, `handle` runs for every job, one at a place; a handler that throws hands its job back for a later try.
 */
export async function workOnTasks(
  concurrency: number,
  handle: (taskId: string, lastTry: boolean) => Promise<void>,
  program?: ProgramName,
): Promise<Slots> {
  const boss = await openQueue(true);
  const queue = queueOf(program);
  return keepSlots(concurrency, {
    open: () =>
      boss.work(
        queue,
        { ...ONE_BY_ONE, includeMetadata: true },
        async (jobs: JobWithMetadata<TaskJob>[]) => {
          for (const { data, retryCount, retryLimit } of jobs) {
            await handle(data.taskId, retryCount >= retryLimit);
          }
        },
      ),
    close: (id) => boss.offWork(queue, { id, wait: true }),
  });
}
