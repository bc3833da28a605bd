/** A worker of its own process for flow tests, on the test file's database. */
import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

const main = fileURLToPath(new URL('../../worker/main.ts', import.meta.url));

/** Starts a worker from the sources; it inherits the database of the test file, and takes further settings. */
export function startWorker(settings: Record<string, string> = {}): ChildProcess {
  return spawn(process.execPath, ['--import', 'tsx', main], {
    stdio: ['ignore', 'ignore', 'inherit'],
    env: { ...process.env, WINDLASS_WORKER_CONCURRENCY: '2', ...settings },
  });
}

/** Kills a worker without a warning, as a machine that loses its power would. */
export async function killWorker(worker: ChildProcess): Promise<void> {
  if (worker.exitCode !== null || worker.signalCode !== null) return;
  const gone = once(worker, 'exit');
  worker.kill('SIGKILL');
  await gone;
}
