/** The stream of a batch's progress: what it says, and that it leaves nothing behind. */
import { afterAll, afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { db } from '$lib/server/db';
import { readUpload } from '$lib/server/drafts';
import { tell } from '$lib/server/live';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { cancel } from '$lib/server/tasks';
import { GET } from '../../src/routes/(app)/batches/[id]/events/+server';
import { newTeam } from '../support/people';

afterAll(stopQueue);
// Only what repeats: the driver's own time-outs stay real.
beforeEach(() => void vi.useFakeTimers({ toFake: ['setInterval', 'clearInterval'] }));
afterEach(() => void vi.useRealTimers());

async function* bytesOf(text: string) {
  yield new TextEncoder().encode(text);
}

async function newBatch(member: Member): Promise<string> {
  const reading = readingSchema.parse({});
  const options = { name: 'A batch', source: 'paste', format: 'smi', reading } as const;
  const id = await readUpload(member, options, bytesOf('CCCC\nCCCCC'), () => undefined);
  await submit(member, id, planSchema.parse({ conformers: {} }));
  return id;
}

async function openStream(member: Member, id: string): Promise<ReadableStream<Uint8Array>> {
  const locals = { user: {}, membership: { ...member, teamName: 'A team' } };
  const response = await GET({ locals, params: { id } } as never);
  return response.body!;
}

describe('the stream of a batch’s progress', () => {
  it('says how far the batch is, and again when that changes', async () => {
    const { modeler } = await newTeam();
    const id = await newBatch(modeler);
    const before = vi.getTimerCount();
    const reader = (await openStream(modeler, id)).getReader();
    const next = async () => new TextDecoder().decode((await reader.read()).value);
    expect(await next()).toContain('"queued":2');
    await cancel(modeler, { batchId: id });
    expect(await next()).toContain('"cancelled":2');
    expect(vi.getTimerCount()).toBe(before + 1);
    await reader.cancel();
    expect(vi.getTimerCount()).toBe(before);
  });

  it('ends for good when the page is closed while it is still opening', async () => {
    const { modeler } = await newTeam();
    const id = await newBatch(modeler);
    const before = vi.getTimerCount();
    const stream = await openStream(modeler, id);
    await stream.cancel();
    await tell(db, 'batch-changed', [id]);
    // A timer that writes into a closed stream would bring the whole process down.
    expect(vi.getTimerCount()).toBe(before);
  });
});
