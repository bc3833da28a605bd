/** Everything there is to measure as one text: this process, every living worker, and what the database knows. */
import { sql } from 'drizzle-orm';
import { AggregatorRegistry, Gauge, Registry, type MetricObjectWithValues } from 'prom-client';
import { db } from './db';
import { environment } from './environment';
import { log } from './log';
import { registry } from './metrics';
import { oldestWaitingSeconds, queueDepth } from './operation';
import { metricsOfLiving } from './workers';

type Family = MetricObjectWithValues<never>;

export const METRICS_CONTENT_TYPE = registry.contentType;

function gauge(register: Registry, name: string, help: string, labelNames: string[] = []): Gauge {
  return new Gauge({ name: `windlass_${name}`, help, labelNames, registers: [register] });
}

async function measureDatabase(register: Registry): Promise<Family[][]> {
  const waiting = gauge(register, 'queue_tasks', 'Tasks that wait, by kind', ['kind']);
  const running = gauge(register, 'running_tasks', 'Tasks that run, by kind', ['kind']);
  for (const { kind, queued, running: atWork } of await queueDepth()) {
    waiting.set({ kind }, queued);
    running.set({ kind }, atWork);
  }
  gauge(register, 'oldest_waiting_seconds', 'How long the oldest waiting task waits').set(
    await oldestWaitingSeconds(),
  );
  const connections = gauge(
    register,
    'database_connections',
    'Connections of all processes to the database, by what they do',
    ['state'],
  );
  const rows = await db.execute<{ state: string; count: number }>(
    sql`select coalesce(state, 'other') as state, count(*)::int as count from pg_stat_activity
        where datname = current_database() and backend_type = 'client backend' group by 1`,
  );
  for (const { state, count } of rows) connections.set({ state }, count);
  return metricsOfLiving();
}

/** The text for collectors. While the database is away it tells what the process knows by itself. */
export async function readMetrics(): Promise<string> {
  const measured = new Registry();
  gauge(measured, 'database_pool_size', 'Most connections this process makes for queries').set(
    environment.WINDLASS_DATABASE_POOL,
  );
  const up = gauge(measured, 'database_up', '1 when the database answered this reading');
  const ofWorkers = await measureDatabase(measured).catch((error: unknown) => {
    log.warn({ error }, 'Metrics of the database could not be read');
    return null;
  });
  up.set(ofWorkers ? 1 : 0);
  const families = [
    await registry.getMetricsAsJSON(),
    await measured.getMetricsAsJSON(),
    ...(ofWorkers ?? []),
  ];
  // Each process has labels of its own, so that nothing is summed up here: families are only put together.
  const together = families.map((each) =>
    each.map((family) => ({ ...family, aggregator: 'sum' as const })),
  );
  return AggregatorRegistry.aggregate(together).metrics();
}
