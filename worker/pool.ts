/** The compute threads of this worker: one request a thread, cancelled gently first and by ending the thread if need be. */
import { availableParallelism } from 'node:os';
import { fileURLToPath } from 'node:url';
import { MessageChannel } from 'node:worker_threads';
import { Piscina } from 'piscina';
import { environment } from '../src/lib/server/environment';
import type { Request } from '../src/lib/engine';
import type { ComputeAnswer, ComputeOrder } from './thread';

/** A thread that has not answered a cancel after this long is ended; with it a cancel acts within a second. */
const PATIENCE_MS = 500;

/** How many tasks this worker runs at once. */
export const concurrency = environment.WINDLASS_WORKER_CONCURRENCY || availableParallelism();

// In development the threads run the sources; after a build they run what was built beside this file.
const fromSources = import.meta.url.endsWith('.ts');
const pool = new Piscina<ComputeOrder, ComputeAnswer>({
  filename: fileURLToPath(new URL(fromSources ? './thread.ts' : './thread.js', import.meta.url)),
  // Threads stand ready from the start, and a cancelled task's thread is replaced at once: getting ready takes seconds.
  minThreads: concurrency,
  maxThreads: concurrency,
  ...(fromSources ? { execArgv: ['--import', 'tsx'] } : {}),
});

export interface ComputeOptions {
  readonly budget: number;
  readonly signal: AbortSignal;
  readonly report: (fraction: number, stage: string) => void;
}

/** Computes a request in a thread of its own. Rejects when cancelled, or when the thread died. */
export async function computeInThread(
  request: Request,
  { budget, signal, report }: ComputeOptions,
): Promise<ComputeAnswer> {
  const { port1, port2 } = new MessageChannel();
  const end = new AbortController();
  let patience: NodeJS.Timeout | undefined;
  const cancel = () => {
    port1.postMessage('cancel');
    patience = setTimeout(() => end.abort(), PATIENCE_MS);
  };
  port1.on('message', ({ fraction, stage }: { fraction: number; stage: string }) =>
    report(fraction, stage),
  );
  signal.addEventListener('abort', cancel, { once: true });
  try {
    signal.throwIfAborted();
    return await pool.run(
      { request, budget, port: port2 },
      { transferList: [port2], signal: end.signal },
    );
  } finally {
    signal.removeEventListener('abort', cancel);
    clearTimeout(patience);
    port1.close();
  }
}

/** Ends every thread at once. */
export function closePool(): Promise<void> {
  return pool.destroy();
}
