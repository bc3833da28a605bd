/** What stands on a desk, by role. */
import { afterAll, describe, expect, it } from 'vitest';
import { planSchema, readingSchema } from '$lib/domain/submission';
import * as desk from '$lib/server/desk';
import { readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { newTeam } from '../support/people';

afterAll(stopQueue);

async function* bytesOf(text: string) {
  yield new TextEncoder().encode(text);
}

function draft(member: Member, name: string): Promise<string> {
  const reading = readingSchema.parse({});
  const options = { name, source: 'paste', format: 'smi', reading } as const;
  return readUpload(member, options, bytesOf('CCCC\nnonsense'), () => undefined);
}

describe('a desk', () => {
  it('has the own drafts and troubles, and the batches of others apart', async () => {
    const { chemist, modeler, reader } = await newTeam();
    const id = await draft(chemist, 'Submitted');
    await submit(chemist, id, planSchema.parse({ conformers: {} }));
    await draft(chemist, 'Left for later');

    const own = await desk.load(chemist);
    expect(own.drafts).toMatchObject([{ name: 'Left for later', rows: 2 }]);
    expect(own.troubles).toMatchObject([
      { name: 'Submitted', failed: 0, unreadable: 1, warned: 0 },
    ]);
    expect(own.own.rows).toMatchObject([{ name: 'Submitted', size: 2, counts: { queued: 1 } }]);
    expect(own.team.rows).toEqual([]);

    const colleague = await desk.load(modeler);
    expect([colleague.drafts, colleague.troubles, colleague.own.rows]).toEqual([[], [], []]);
    expect(colleague.team.rows).toMatchObject([{ name: 'Submitted' }]);
    expect((await desk.load(reader)).team.rows).toMatchObject([{ name: 'Submitted' }]);
  });

  it('shows nothing of another team', async () => {
    const { chemist } = await newTeam();
    const id = await draft(chemist, 'Theirs');
    await submit(chemist, id, planSchema.parse({ conformers: {} }));
    const stranger = await desk.load((await newTeam()).lead);
    expect([stranger.own.total, stranger.team.total, stranger.drafts]).toEqual([0, 0, []]);
  });
});
