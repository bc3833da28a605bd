/** What flow tests of batches share: uploads made of text, and tasks performed here as a worker would. */
import { setImmediate } from 'node:timers/promises';
import { eq } from 'drizzle-orm';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { perform } from '$lib/engine';
import { db } from '$lib/server/db';
import { tasks } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import * as results from '$lib/server/results';
import { submit } from '$lib/server/submission';
import { claim } from '$lib/server/tasks';

/** An upload's bytes. */
export async function* bytesOf(text: string): AsyncGenerator<Uint8Array> {
  yield new TextEncoder().encode(text);
}

/** Submits pasted SMILES with a plan; answers the batch's id. */
export async function submitPasted(member: Member, text: string, plan: unknown): Promise<string> {
  const reading = readingSchema.parse({});
  const options = { name: 'A batch', source: 'paste', format: 'smi', reading } as const;
  const id = await readUpload(member, options, bytesOf(text), () => undefined);
  await submit(member, id, planSchema.parse(plan));
  return id;
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
