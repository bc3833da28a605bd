/** News between processes over LISTEN and NOTIFY: one connection a process, fanned out to whoever waits here. */
import { sql } from 'drizzle-orm';
import { client, type Executor } from './db';

/**
 * What can be news: a batch whose tasks changed, a task that a person cancelled, a molecule whose notes changed, a worker
 * of whom an operator wants something.
 */
export type Topic = 'batch-changed' | 'task-cancelled' | 'notes-changed' | 'worker-ordered';
type Hear = (id: string) => void;

const CHANNELS: Record<Topic, string> = {
  'batch-changed': 'windlass_batch_changed',
  'task-cancelled': 'windlass_task_cancelled',
  'notes-changed': 'windlass_notes_changed',
  'worker-ordered': 'windlass_worker_ordered',
};

const hearers = new Map<Topic, Set<Hear>>();
const listening = new Map<Topic, Promise<unknown>>();

/** Tells every process; inside a transaction the news goes out when it commits. */
export async function tell(
  executor: Executor,
  topic: Topic,
  ids: readonly string[],
): Promise<void> {
  for (const id of ids) await executor.execute(sql`select pg_notify(${CHANNELS[topic]}, ${id})`);
}

/**
 * Calls `hear` with the id of every piece of news on a topic, and with an empty id after a lost connection came back,
 * when anything may have been missed. Returns the way to stop.
 */
export async function listen(topic: Topic, hear: Hear): Promise<() => void> {
  const set = hearers.get(topic) ?? new Set<Hear>();
  hearers.set(topic, set);
  set.add(hear);
  const pass = (id: string) => set.forEach((each) => each(id));
  if (!listening.has(topic)) {
    listening.set(
      topic,
      client
        .listen(CHANNELS[topic], pass, () => pass(''))
        .catch((error: unknown) => {
          listening.delete(topic);
          throw error;
        }),
    );
  }
  await listening.get(topic);
  return () => void set.delete(hear);
}
