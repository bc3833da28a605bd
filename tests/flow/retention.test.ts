/** Results older than the team's months go: announced in time, never what is pinned or still used, and only once. */
import { and, eq, sql } from 'drizzle-orm';
import { afterAll, describe, expect, it } from 'vitest';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { listEntries } from '$lib/server/batches';
import { db } from '$lib/server/db';
import { batches, events, letters, results, users } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import { deliverWaiting } from '$lib/server/letter-delivery';
import { setMemberLimits, setTeamLimits } from '$lib/server/limit-settings';
import type { Member } from '$lib/server/member';
import { pin, unpin } from '$lib/server/pins';
import { stopQueue } from '$lib/server/queue';
import { keepRetention, NOTICE_DAYS } from '$lib/server/retention';
import { submit } from '$lib/server/submission';
import { rerun } from '$lib/server/tasks';
import { bytesOf, performAll } from '../support/batches';
import { newTeam } from '../support/people';

afterAll(stopQueue);

const DAY_MS = 86_400_000;
const inDays = (days: number) => new Date(Date.now() + days * DAY_MS);
const plan = planSchema.parse({ conformers: { effort: 'quick' } });

/** A batch whose results are all there, and which ended so many days ago. */
async function oldBatch(member: Member, smiles: string, days: number, name = `Batch of ${smiles}`) {
  const reading = readingSchema.parse({});
  const options = { name, source: 'paste', format: 'smi', reading } as const;
  const id = await readUpload(member, options, bytesOf(smiles), () => undefined);
  const { queued } = await submit(member, id, plan);
  if (queued > 0) await performAll(id);
  await db
    .update(batches)
    .set({ finishedAt: sql`now() - make_interval(days => ${days})` })
    .where(eq(batches.id, id));
  return id;
}

/** A team that keeps results for a month. */
async function teamOfOneMonth() {
  const team = await newTeam();
  await setTeamLimits(team.lead, { months: 1 });
  return team;
}

const batchOf = async (id: string) =>
  (await db.select().from(batches).where(eq(batches.id, id)))[0];
const resultCount = ({ teamId }: Member) => db.$count(results, eq(results.teamId, teamId));
const announcements = async ({ userId }: Member) =>
  db
    .select({ text: letters.text, subject: letters.subject })
    .from(letters)
    .innerJoin(users, eq(users.email, letters.address))
    .where(and(eq(users.id, userId), sql`${letters.subject} like 'Results of%'`))
    .orderBy(letters.createdAt);

/** Announces, delivers the letters, and looks again when the notice is over. */
async function announceAndWait(): Promise<void> {
  await keepRetention();
  await deliverWaiting();
  await keepRetention(inDays(NOTICE_DAYS + 1));
}

describe('old results', () => {
  it('are announced to leads and makers first, and go when the notice is over', async () => {
    const { lead, chemist, modeler } = await teamOfOneMonth();
    const old = await oldBatch(chemist, 'CCCC', 40, 'Old butane');
    const young = await oldBatch(modeler, 'CCCCC', 3, 'Young pentane');
    await keepRetention();
    const told = await announcements(lead);
    expect(told).toHaveLength(1);
    expect(told[0].text).toContain('- Old butane');
    expect(told[0].text).not.toContain('Young pentane');
    expect(await announcements(chemist)).toHaveLength(1);
    expect(await announcements(modeler)).toEqual([]);
    expect((await batchOf(old)).removalAt!.getTime()).toBeGreaterThan(inDays(13.9).getTime());
    await deliverWaiting();
    await keepRetention(inDays(NOTICE_DAYS - 1));
    expect(await resultCount(lead)).toBe(2);
    await Promise.all([
      keepRetention(inDays(NOTICE_DAYS + 1)),
      keepRetention(inDays(NOTICE_DAYS + 1)),
    ]);
    expect(await resultCount(lead)).toBe(1);
    expect((await batchOf(old)).removedAt).not.toBeNull();
    expect((await batchOf(young)).removedAt).toBeNull();
    const query = {
      state: null,
      sort: 'position',
      descending: false,
      page: 1,
      pageSize: 10,
    } as const;
    const { rows } = await listEntries(chemist, old, query);
    expect(rows).toMatchObject([{ done: 1, removed: 1 }]);
    expect(
      await db.$count(
        events,
        and(
          eq(events.teamId, lead.teamId),
          eq(events.subject, `batch:${old}`),
          eq(events.action, 'remove results'),
        ),
      ),
    ).toBe(1);
  });

  it('can be computed again, and are young then', async () => {
    const { lead, chemist, modeler } = await teamOfOneMonth();
    const id = await oldBatch(chemist, 'CCCC', 40);
    await announceAndWait();
    expect(await resultCount(lead)).toBe(0);
    expect(await rerun(modeler, { batchId: id })).toBe(1);
    await performAll(id);
    expect(await resultCount(lead)).toBe(1);
    expect(await batchOf(id)).toMatchObject({ removedAt: null, removalAt: null });
    await announceAndWait();
    expect(await resultCount(lead)).toBe(1);
  });

  it('stay while a younger or a pinned batch uses them', async () => {
    const { lead, chemist, modeler } = await teamOfOneMonth();
    const old = await oldBatch(chemist, 'CCCC\nCCCCC', 40);
    await oldBatch(modeler, 'CCCC', 2);
    const pinned = await oldBatch(modeler, 'CCCCCC', 50);
    await pin(modeler, pinned);
    await announceAndWait();
    expect((await batchOf(old)).removedAt).not.toBeNull();
    const left = await db
      .select({ id: results.id })
      .from(results)
      .where(eq(results.teamId, lead.teamId));
    expect(left).toHaveLength(2);
    expect((await batchOf(pinned)).removedAt).toBeNull();
  });

  it('stay where the batch is pinned, or the limit raised, after the letter', async () => {
    const { lead, chemist, modeler } = await teamOfOneMonth();
    const id = await oldBatch(chemist, 'CCCC', 40);
    await keepRetention();
    await deliverWaiting();
    await pin(modeler, id);
    await keepRetention(inDays(NOTICE_DAYS + 1));
    expect(await resultCount(lead)).toBe(1);
    // Unpinned again, nothing goes before a second letter was out for as long as the first.
    await unpin(modeler, id);
    await keepRetention(inDays(NOTICE_DAYS + 1));
    expect(await resultCount(lead)).toBe(1);
    expect(await announcements(lead)).toHaveLength(2);
    await deliverWaiting();
    await setTeamLimits(lead, { months: 3 });
    await keepRetention(inDays(2 * NOTICE_DAYS + 2));
    expect(await resultCount(lead)).toBe(1);
    expect((await batchOf(id)).removalAt).toBeNull();
  });

  it('stay until a letter about them arrived', async () => {
    const { lead, chemist } = await teamOfOneMonth();
    await oldBatch(chemist, 'CCCC', 40);
    await keepRetention();
    await db.update(letters).set({
      state: 'given-up',
      text: null,
      html: null,
      endedAt: sql`now()`,
      reason: 'no such box',
    });
    await keepRetention(inDays(NOTICE_DAYS + 1));
    expect(await resultCount(lead)).toBe(1);
    expect(await announcements(lead)).toHaveLength(2);
  });

  it('go after the months of their maker, where those are fewer', async () => {
    const { lead, chemist, modeler } = await newTeam();
    await setTeamLimits(lead, { months: 12 });
    await setMemberLimits(lead, chemist.userId, { months: 1 });
    const [theirs, others] = [
      await oldBatch(chemist, 'CCCC', 40),
      await oldBatch(modeler, 'CCCCC', 40),
    ];
    await announceAndWait();
    expect((await batchOf(theirs)).removedAt).not.toBeNull();
    expect((await batchOf(others)).removedAt).toBeNull();
  });
});

describe('pins', () => {
  it('are set by modelers and leads of the own team, and are in the record once', async () => {
    const { lead, chemist, modeler } = await newTeam();
    const other = await newTeam();
    const id = await oldBatch(chemist, 'CCCC', 1);
    await expect(pin(chemist, id)).rejects.toMatchObject({ status: 403 });
    await expect(pin(other.lead, id)).rejects.toMatchObject({ status: 404 });
    await Promise.all([pin(modeler, id), pin(lead, id)]);
    expect((await batchOf(id)).pinnedAt).not.toBeNull();
    await unpin(lead, id);
    await unpin(lead, id);
    const recorded = await db
      .select({ action: events.action })
      .from(events)
      .where(and(eq(events.teamId, lead.teamId), sql`${events.action} like '%pin batch'`))
      .orderBy(events.id);
    expect(recorded.map(({ action }) => action)).toEqual(['pin batch', 'unpin batch']);
  });
});
