/** What flow tests of batches share: uploads made of text, and tasks performed here as a worker would. */
import { setImmediate } from 'node:timers/promises';
import { eq } from 'drizzle-orm';
import { perform } from '$lib/engine';
import { db } from '$lib/server/db';
import { tasks } from '$lib/server/db/schema';
import * as results from '$lib/server/results';
import { claim } from '$lib/server/tasks';

/** An upload's bytes. */
export async function* bytesOf(text: string): AsyncGenerator<Uint8Array> {
  yield new TextEncoder().encode(text);
}

/** Performs every task of a batch, one after the other, and stores what comes out. */
export async function performAll(batchId: string): Promise<void> {
  for (const { id } of await db.select().from(tasks).where(eq(tasks.batchId, batchId))) {
    const task = await claim(id, 'a test');
    const result = await perform(results.requestOf(task!), {
      now: () => performance.now(),
      breathe: () => setImmediate(),
    });
    await results.store(task!, result);
  }
}
