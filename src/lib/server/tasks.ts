/** Tasks: claimed, kept alive, finished, cancelled and run again. The row is the only truth shown to people. */
import { and, eq, inArray, lt, or, sql } from 'drizzle-orm';
import { batchFinished } from './batch-finish';
import { db, type Executor } from './db';
import { batches, entries, molecules, tasks } from './db/schema';
import { recordEvent } from './events';
import { checkRoom, lockTeam } from './limits';
import { tell } from './live';
import { notFound, require, type Member } from './member';
import { countTask } from './metrics';
import { dequeue } from './queue';
import { queueAgain } from './queue-again';

/** A running task whose worker has been silent for this long is lost, and another worker may take it. */
const SILENCE = sql`now() - interval '12 seconds'`;
/** After this long nobody will come back for it: the queue has given up. */
const ABANDONED = sql`now() - interval '3 minutes'`;

/** What a worker needs to compute a task. */
export interface ClaimedTask {
  readonly id: string;
  readonly attempt: number;
  readonly batchId: string;
  readonly teamId: string;
  readonly moleculeId: string;
  readonly kind: (typeof tasks.$inferSelect)['kind'];
  readonly settings: unknown;
  readonly format: 'smiles' | 'molfile';
  readonly structure: string;
}

/** Why something failed, as it is stored and shown. */
export interface TaskError {
  readonly code: string;
  readonly message: string;
  readonly atom?: number;
  readonly line?: number;
}

/**
 * Takes a task for a worker: queued, or running under a worker that fell silent. Returns null when there is nothing to
 * do any more (done, cancelled, deleted); throws when another worker is on it right now.
 */
export async function claim(taskId: string, worker: string): Promise<ClaimedTask | null> {
  const [claimed] = await db
    .update(tasks)
    .set({
      state: 'running',
      attempt: sql`${tasks.attempt} + 1`,
      worker,
      progress: 0,
      stage: '',
      startedAt: sql`now()`,
      beatAt: sql`now()`,
    })
    .where(
      and(
        eq(tasks.id, taskId),
        or(eq(tasks.state, 'queued'), and(eq(tasks.state, 'running'), lt(tasks.beatAt, SILENCE))),
      ),
    )
    .returning({ id: tasks.id, attempt: tasks.attempt, batchId: tasks.batchId });
  if (!claimed) {
    const [task] = await db.select({ state: tasks.state }).from(tasks).where(eq(tasks.id, taskId));
    if (task?.state === 'running')
      throw new Error(`task ${taskId} is still in another worker's hands`);
    return null;
  }
  const [details] = await db
    .select({
      teamId: batches.teamId,
      moleculeId: molecules.id,
      kind: tasks.kind,
      settings: tasks.settings,
      format: molecules.format,
      structure: molecules.structure,
    })
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
    .where(eq(tasks.id, taskId));
  if (!details) return null;
  await tell(db, 'batch-changed', [claimed.batchId]);
  return { ...claimed, ...details };
}

/** The rows that a worker may still write to: this task in this attempt, if nobody cancelled it or took it over. */
function held(task: ClaimedTask) {
  return and(eq(tasks.id, task.id), eq(tasks.state, 'running'), eq(tasks.attempt, task.attempt));
}

/** A sign of life with the progress so far. False means that the task was cancelled or taken over: stop. */
export async function beat(task: ClaimedTask, progress: number, stage: string): Promise<boolean> {
  const rows = await db
    .update(tasks)
    .set({ progress, stage, beatAt: sql`now()` })
    .where(held(task))
    .returning({ id: tasks.id });
  if (rows.length === 0) return false;
  await tell(db, 'batch-changed', [task.batchId]);
  return true;
}

/**
 * Marks a task done with its result, in the transaction that stored it. False when the task was cancelled or taken
 * over meanwhile; the caller then rolls back.
 */
export async function finish(
  executor: Executor,
  task: ClaimedTask,
  resultId: string,
  reused: boolean,
): Promise<boolean> {
  const rows = await executor
    .update(tasks)
    .set({ state: 'done', progress: 1, stage: '', resultId, reused, finishedAt: sql`now()` })
    .where(held(task))
    .returning({ id: tasks.id });
  if (rows.length === 0) return false;
  await batchFinished(executor, task.batchId);
  await tell(executor, 'batch-changed', [task.batchId]);
  return true;
}

/**
 * Marks a task failed by its molecule or its settings, which trying again would not mend. False when the task was
 * cancelled or taken over meanwhile.
 */
export async function fail(task: ClaimedTask, error: TaskError): Promise<boolean> {
  return db.transaction(async (transaction) => {
    const rows = await transaction
      .update(tasks)
      .set({ state: 'failed', error, stage: '', finishedAt: sql`now()` })
      .where(held(task))
      .returning({ id: tasks.id });
    if (rows.length === 0) return false;
    await batchFinished(transaction, task.batchId);
    await tell(transaction, 'batch-changed', [task.batchId]);
    return true;
  });
}

/** Gives a task back to the queue after a fault of the machine; its job is thrown back by the caller. */
export async function release(task: ClaimedTask): Promise<void> {
  await db
    .update(tasks)
    .set({ state: 'queued', progress: 0, stage: '', worker: null, startedAt: null, beatAt: null })
    .where(held(task));
  await tell(db, 'batch-changed', [task.batchId]);
}

/** What is told when the machines, not the molecule, kept failing. */
export const workerLost: TaskError = {
  code: 'worker-lost',
  message:
    'The computer running this task stopped several times before it was done. Run it again; if it happens again, tell the operator.',
};

/** Ends tasks whose workers kept dying until the queue gave up; without it they would seem to run for ever. */
export async function failAbandoned(): Promise<number> {
  return db.transaction(async (transaction) => {
    const rows = await transaction
      .update(tasks)
      .set({ state: 'failed', error: workerLost, finishedAt: sql`now()` })
      .where(and(eq(tasks.state, 'running'), lt(tasks.beatAt, ABANDONED)))
      .returning({ batchId: tasks.batchId });
    // In the same order everywhere, so that no two wait for each other.
    const changed = [...new Set(rows.map((row) => row.batchId))].sort();
    for (const batchId of changed) await batchFinished(transaction, batchId);
    await tell(transaction, 'batch-changed', changed);
    return rows.length;
  });
}

/** The chosen tasks, if they are the member's own team's; locked until the transaction ends. */
async function lockOwn(executor: Executor, member: Member, where: TaskChoice) {
  const chosen = and(
    eq(tasks.batchId, where.batchId),
    where.rows ? inArray(tasks.entryId, [...where.rows]) : undefined,
    where.tasks ? inArray(tasks.id, [...where.tasks]) : undefined,
  );
  return executor
    .select({
      id: tasks.id,
      kind: tasks.kind,
      state: tasks.state,
      resultId: tasks.resultId,
      batchId: tasks.batchId,
    })
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(and(chosen, eq(batches.teamId, member.teamId)))
    .orderBy(tasks.id)
    .for('update', { of: tasks });
}

/** Which tasks are meant: all of a batch, those of some of its rows, or single ones. */
export interface TaskChoice {
  readonly batchId: string;
  readonly rows?: readonly string[];
  readonly tasks?: readonly string[];
}

/** Cancels what is queued or running among the chosen tasks; running ones stop within a second. Returns how many. */
export async function cancel(member: Member, choice: TaskChoice): Promise<number> {
  require(member, 'cancel tasks');
  const cancelled = await db.transaction(async (transaction) => {
    const rows = await lockOwn(transaction, member, choice);
    if (rows.length === 0) notFound('task');
    const open = rows.filter((row) => row.state === 'queued' || row.state === 'running');
    const ids = open.map((row) => row.id);
    if (ids.length === 0) return [];
    await transaction
      .update(tasks)
      .set({ state: 'cancelled', stage: '', finishedAt: sql`now()` })
      .where(inArray(tasks.id, ids));
    const queued = open.filter((row) => row.state === 'queued').map((row) => row.id);
    await dequeue(transaction, queued);
    // Nobody has to be told by letter of what the team stopped as a whole.
    await batchFinished(transaction, choice.batchId, { isQuiet: !choice.rows });
    await recordEvent(transaction, member, 'cancel tasks', `batch:${open[0].batchId}`, {
      tasks: ids.length,
    });
    const running = open.filter((row) => row.state === 'running').map((row) => row.id);
    await tell(transaction, 'task-cancelled', running);
    await tell(transaction, 'batch-changed', [...new Set(open.map((row) => row.batchId))]);
    return open;
  });
  for (const { kind } of cancelled) countTask(kind, 'cancelled');
  return cancelled.length;
}

/**
 * Queues those among the chosen tasks again, as a new attempt, that failed, were cancelled, or lost their result for its
 * age. Returns how many.
 */
export async function rerun(member: Member, choice: TaskChoice): Promise<number> {
  require(member, 'rerun tasks');
  return db.transaction(async (transaction) => {
    await lockTeam(transaction, member.teamId);
    const rows = await lockOwn(transaction, member, choice);
    if (rows.length === 0) notFound('task');
    const ended = rows.filter(
      ({ state, resultId }) =>
        state === 'failed' || state === 'cancelled' || (state === 'done' && resultId === null),
    );
    const ids = ended.map((row) => row.id);
    if (ids.length === 0) return 0;
    await queueAgain(transaction, ended, await waitingOf(transaction, member));
    await checkRoom(transaction, member, ended.length);
    await recordEvent(transaction, member, 'rerun tasks', `batch:${ended[0].batchId}`, {
      tasks: ids.length,
    });
    await tell(transaction, 'batch-changed', [...new Set(ended.map((row) => row.batchId))]);
    return ids.length;
  });
}

/**
 * How many of a member's tasks already wait. A task's priority is minus its place in its own member's line, so that
 * members take turns and one molecule never waits behind another member's thousands.
 */
export async function waitingOf(executor: Executor, member: Member): Promise<number> {
  const [row] = await executor
    .select({ count: sql<number>`count(*)::int` })
    .from(tasks)
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(and(eq(tasks.state, 'queued'), eq(batches.createdBy, member.userId)));
  return row.count;
}
