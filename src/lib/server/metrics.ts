/** What this process counts and times, for those who watch the product with Prometheus or the like. */
import { Counter, Gauge, Histogram, Registry, collectDefaultMetrics } from 'prom-client';

export const registry = new Registry();
const registers = [registry];

const requestSeconds = new Histogram({
  name: 'windlass_http_request_seconds',
  help: 'Time until an answer began, by route pattern and status',
  labelNames: ['method', 'route', 'status'],
  buckets: [0.01, 0.03, 0.1, 0.3, 1, 3, 10, 30],
  registers,
});
const streams = new Gauge({
  name: 'windlass_live_streams',
  help: 'Open connections of server-sent events',
  labelNames: ['about'],
  registers,
});
const tasksFinished = new Counter({
  name: 'windlass_tasks_finished_total',
  help: 'Tasks that ended, by kind and how they ended',
  labelNames: ['kind', 'state'],
  registers,
});
const taskSeconds = new Histogram({
  name: 'windlass_task_seconds',
  help: 'Time of a task from its claim to its end, without those that were cancelled',
  labelNames: ['kind'],
  buckets: [0.1, 0.3, 1, 3, 10, 30, 100, 300, 1000, 3000],
  registers,
});
const engineSeconds = new Counter({
  name: 'windlass_engine_seconds_total',
  help: 'Seconds that the engine computed for results that were stored',
  labelNames: ['kind'],
  registers,
});
const deliveries = new Counter({
  name: 'windlass_webhook_attempts_total',
  help: 'Attempts to deliver to webhooks, by how they ended',
  labelNames: ['result'],
  registers,
});
const letters = new Counter({
  name: 'windlass_letters_total',
  help: 'Letters, by whether the mail server took them',
  labelNames: ['result'],
  registers,
});

/** Begins to count memory, processor and event loop of the process; `labels` are put on everything it counts. */
export function watchProcess(labels: Record<string, string> = {}): void {
  registry.setDefaultLabels(labels);
  collectDefaultMetrics({ register: registry });
}

/** Counts a request that was answered. The route is its pattern: addresses carry ids, which are nobody's business. */
export function countRequest(request: {
  readonly method: string;
  readonly route: string | null;
  readonly status: number;
  readonly milliseconds: number;
}): void {
  const { method, route, status, milliseconds } = request;
  requestSeconds.observe({ method, route: route ?? 'none', status }, milliseconds / 1000);
}

/** Counts an open connection of server-sent events until the returned function is called. */
export function countStream(about: 'batch' | 'notes'): () => void {
  streams.inc({ about });
  return () => streams.dec({ about });
}

/** Counts the end of a task; times are only told by who ran it, seconds. */
export function countTask(
  kind: string,
  state: 'done' | 'failed' | 'cancelled',
  seconds?: { readonly task: number; readonly engine?: number },
): void {
  tasksFinished.inc({ kind, state });
  if (!seconds) return;
  taskSeconds.observe({ kind }, seconds.task);
  if (seconds.engine !== undefined) engineSeconds.inc({ kind }, seconds.engine);
}

export function countDelivery(result: 'delivered' | 'failed'): void {
  deliveries.inc({ result });
}

export function countLetter(result: 'sent' | 'given-up' | 'unsure'): void {
  letters.inc({ result });
}
