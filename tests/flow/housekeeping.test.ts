/** What nobody needs any more is forgotten, and nothing else. */
import { eq, sql } from 'drizzle-orm';
import { afterAll, describe, expect, it } from 'vitest';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { db } from '$lib/server/db';
import { batches, molecules } from '$lib/server/db/schema';
import { discardDraft, DRAFT_DAYS, readUpload } from '$lib/server/drafts';
import { tidy } from '$lib/server/housekeeping';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { newTeam } from '../support/people';

afterAll(stopQueue);

async function* bytesOf(text: string) {
  yield new TextEncoder().encode(text);
}

function draft(member: Member, smiles: string): Promise<string> {
  const reading = readingSchema.parse({});
  const options = { name: 'A batch', source: 'paste', format: 'smi', reading } as const;
  return readUpload(member, options, bytesOf(smiles), () => undefined);
}

/** Makes a batch, and the molecules of its team, look older. */
async function age(member: Member, batchId: string, days: number): Promise<void> {
  const then = sql`now() - make_interval(days => ${days})`;
  await db.update(batches).set({ createdAt: then }).where(eq(batches.id, batchId));
  await db.update(molecules).set({ createdAt: then }).where(eq(molecules.teamId, member.teamId));
}

const batchIds = async ({ teamId }: Member) =>
  (await db.select({ id: batches.id }).from(batches).where(eq(batches.teamId, teamId))).map(
    ({ id }) => id,
  );
const smilesOf = async ({ teamId }: Member) =>
  (
    await db
      .select({ smiles: molecules.smiles })
      .from(molecules)
      .where(eq(molecules.teamId, teamId))
      .orderBy(molecules.smiles)
  ).map(({ smiles }) => smiles);

describe('tidying', () => {
  it('forgets drafts that nobody submitted, with the molecules only they named', async () => {
    const { chemist } = await newTeam();
    const submitted = await draft(chemist, 'CCCC');
    await submit(chemist, submitted, planSchema.parse({ conformers: {} }));
    const old = await draft(chemist, 'CCCC\nCCCCC');
    for (const id of [submitted, old]) await age(chemist, id, DRAFT_DAYS + 1);
    const young = await draft(chemist, 'CCCCCC');
    await tidy();
    expect((await batchIds(chemist)).sort()).toEqual([submitted, young].sort());
    expect(await smilesOf(chemist)).toEqual(['CCCC', 'CCCCCC']);
  });

  it('leaves a draft alone while its maker may come back to it', async () => {
    const { chemist } = await newTeam();
    const id = await draft(chemist, 'CCCC');
    await age(chemist, id, DRAFT_DAYS - 1);
    await tidy();
    expect(await batchIds(chemist)).toEqual([id]);
    expect(await smilesOf(chemist)).toEqual(['CCCC']);
  });

  it('forgets the molecules of a discarded draft after a day', async () => {
    const { chemist } = await newTeam();
    const id = await draft(chemist, 'CCCC');
    await discardDraft(chemist, id);
    await tidy();
    expect(await smilesOf(chemist)).toEqual(['CCCC']);
    await age(chemist, id, 2);
    await tidy();
    expect(await smilesOf(chemist)).toEqual([]);
  });
});
