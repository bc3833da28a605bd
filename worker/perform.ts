/** One task from its claim to its stored result. */
import { log } from '../src/lib/server/log';
import { environment } from '../src/lib/server/environment';
import * as results from '../src/lib/server/results';
import * as tasks from '../src/lib/server/tasks';
import { listen } from '../src/lib/server/live';
import { countTask } from '../src/lib/server/metrics';
import { needsProgram } from '../src/lib/domain/second-opinions';
import type { InstalledPrograms } from './installed-programs';
import { computeInThread } from './pool';
import { performWithProgram } from './program-tasks';
import { ProgramUnavailable } from './programs/run-program';

/** How often a running task shows that it is alive; well under the silence after which it counts as lost. */
const BEAT_MS = 3_000;
/** Progress is written at most this often. */
const PROGRESS_MS = 1_000;

const running = new Map<string, AbortController>();

/** Hears of cancelled tasks from other processes; without the news the next sign of life notices. */
export async function hearCancels(): Promise<void> {
  await listen('task-cancelled', (taskId) => running.get(taskId)?.abort());
}

/**
 * Performs a task: nothing to do when it is done or cancelled already; the stored result where there is one; else it is
 * computed. Throws after faults of the machine, so that the queue delivers the task again, unless it was the last try.
 */
export async function performTask(
  taskId: string,
  worker: string,
  lastTry: boolean,
  installed: InstalledPrograms = {},
): Promise<void> {
  const task = await tasks.claim(taskId, worker);
  if (!task) return;
  if (await results.reuseStored(task)) {
    countTask(task.kind, 'done');
    return;
  }
  const controller = new AbortController();
  running.set(task.id, controller);
  const life = keepAlive(task, controller);
  try {
    await computeAndStore(task, installed, controller.signal, life.report);
  } catch (error) {
    // Cancelled or taken over: the row says so already, and whatever was computed is dropped.
    if (controller.signal.aborted) return;
    log.error({ error, task: task.id, attempt: task.attempt, lastTry }, 'A task could not be run');
    if (lastTry) {
      if (await tasks.fail(task, lastWords(error))) countTask(task.kind, 'failed');
      return;
    }
    await tasks.release(task);
    throw error;
  } finally {
    life.stop();
    running.delete(task.id);
  }
}

/** Why the last try failed: what a program needs of the machine is known better than that of a lost worker. */
function lastWords(error: unknown): tasks.TaskError {
  if (!(error instanceof ProgramUnavailable)) return tasks.workerLost;
  return { code: 'program-unavailable', message: `${error.message} Tell the operator.` };
}

async function computeAndStore(
  task: tasks.ClaimedTask,
  installed: InstalledPrograms,
  signal: AbortSignal,
  report: (fraction: number, stage: string) => void,
): Promise<void> {
  const began = performance.now();
  const since = (engine?: number) => ({
    task: (performance.now() - began) / 1000,
    ...(engine === undefined ? {} : { engine }),
  });
  const budget = environment.WINDLASS_TASK_SECONDS * 1000;
  const limit = AbortSignal.timeout(budget + 60_000);
  const both = AbortSignal.any([signal, limit]);
  const { kind } = task;
  const computing = needsProgram(kind)
    ? performWithProgram({ ...task, kind }, installed, both, report)
    : computeInThread(results.requestOf(task), { budget, signal: both, report });
  const answer = await computing.catch((error: unknown) => {
    if (!limit.aborted || signal.aborted) throw error;
    return { refused: overTime(budget) };
  });
  if ('result' in answer) {
    const engine = answer.result.provenance.seconds;
    if (await results.store(task, answer.result)) countTask(task.kind, 'done', since(engine));
    return;
  }
  if ('store' in answer) {
    if (await answer.store()) countTask(task.kind, 'done', since());
    return;
  }
  const fault = 'broken' in answer ? internalError(task, answer.broken) : answer.refused;
  if (await tasks.fail(task, fault)) countTask(task.kind, 'failed', since());
}

/** Our own code failed on this molecule: trying again would fail again, so it is said and logged instead. */
function internalError(task: tasks.ClaimedTask, trace: string): tasks.TaskError {
  log.error({ task: task.id, trace }, 'The engine failed');
  return {
    code: 'internal-error',
    message: `The computation failed through a fault of the program, not of the molecule. Tell the operator the task's number: ${task.id}.`,
  };
}

function overTime(budget: number): tasks.TaskError {
  return {
    code: 'time-limit',
    message: `The task was stopped at its time limit of ${Math.round(budget / 60_000)} minutes. A smaller molecule, a wider step or less effort may fit.`,
  };
}

/** Writes signs of life and progress until stopped; a task that is no longer held aborts its computation. */
function keepAlive(task: tasks.ClaimedTask, controller: AbortController) {
  let progress = 0;
  let stage = '';
  let written = 0;
  let writing = false;
  const write = async () => {
    if (writing) return;
    writing = true;
    written = Date.now();
    try {
      if (!(await tasks.beat(task, progress, stage))) controller.abort();
    } catch (error) {
      // The database is away for a moment; the computation goes on and the next beat tries again.
      log.warn({ error, task: task.id }, 'A sign of life could not be written');
    } finally {
      writing = false;
    }
  };
  const timer = setInterval(() => void write(), BEAT_MS);
  return {
    report: (fraction: number, what: string) => {
      progress = Math.min(1, Math.max(0, fraction));
      stage = what;
      if (Date.now() - written >= PROGRESS_MS) void write();
    },
    stop: () => clearInterval(timer),
  };
}
