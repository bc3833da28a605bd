/** The worker's signs of life, by which it also hears what an operator wants of it. */
import { listen } from '../src/lib/server/live';
import { log } from '../src/lib/server/log';
import { registry } from '../src/lib/server/metrics';
import type { Slots } from '../src/lib/server/task-slots';
import * as workers from '../src/lib/server/workers';

const BEAT_MS = 3_000;

const stateOf = { take: 'taking', pause: 'paused', drain: 'draining' } as const;

/** What a worker is, as operators see it. */
export type Identity = Pick<workers.WorkerSign, 'name' | 'version' | 'concurrency' | 'programs'>;

/**
 * Shows that the worker lives and does what is wanted: takes tasks, pauses, or drains, which ends with a call of `end`
 * once nothing runs any more. Returns the way to leave.
 */
export async function showLife(
  identity: Identity,
  slots: Slots,
  end: () => Promise<void>,
): Promise<() => Promise<void>> {
  const startedAt = new Date();
  let wanted: workers.WorkerOrder = 'take';
  let hasEnded = false;

  const drain = async () => {
    await slots.pause();
    if (wanted !== 'drain' || hasEnded) return;
    hasEnded = true;
    log.info({ worker: identity.name }, 'The worker is drained and ends');
    await end();
  };
  const obey = () => {
    if (wanted === 'take') slots.take();
    else if (wanted === 'pause') void slots.pause();
    else void drain();
  };
  const beat = async () => {
    const metrics = await registry.getMetricsAsJSON();
    const state = stateOf[wanted];
    wanted = await workers.beat({ ...identity, startedAt, state, metrics });
    obey();
    // Said at once, not with the next sign: an operator looks at the page for it.
    if (stateOf[wanted] !== state) {
      await workers.beat({ ...identity, startedAt, state: stateOf[wanted], metrics });
    }
  };
  let beating: Promise<void> = Promise.resolve();
  const beatSafely = () => {
    beating = beating.then(async () => {
      if (hasEnded) return;
      await beat().catch((error: unknown) =>
        log.warn({ error }, 'The worker could not show that it lives; it is tried again'),
      );
    });
    return beating;
  };
  await listen('worker-ordered', (name) => {
    if (name === identity.name || name === '') void beatSafely();
  });
  await beatSafely();
  const timer = setInterval(() => void beatSafely(), BEAT_MS);
  return async () => {
    clearInterval(timer);
    hasEnded = true;
    await beating;
    await workers.leave(identity.name).catch(() => undefined);
  };
}
