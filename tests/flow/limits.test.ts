/** Limits of teams and members: set by leads within what is above them, and not passed by any submission. */
import { randomUUID } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import { afterAll, describe, expect, it } from 'vitest';
import { limitsFormSchema } from '$lib/domain/limits';
import { newBatchSchema } from '$lib/domain/api';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { submitRequest } from '$lib/server/api-submission';
import { db } from '$lib/server/db';
import { batches, events, letters, results, tasks, users } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import { loadLimits, setMemberLimits, setTeamLimits } from '$lib/server/limit-settings';
import { ceilings, defaultLimits, limitsOf, roomOf } from '$lib/server/limits';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { LimitError } from '$lib/server/refusals';
import { warnOfStorage } from '$lib/server/storage-letters';
import { submit } from '$lib/server/submission';
import { cancel, rerun } from '$lib/server/tasks';
import { bytesOf, performAll } from '../support/batches';
import { newTeam } from '../support/people';

afterAll(stopQueue);

const plan = planSchema.parse({ conformers: {} });

function draft(member: Member, text: string): Promise<string> {
  const reading = readingSchema.parse({});
  const options = { name: 'A batch', source: 'paste', format: 'smi', reading } as const;
  return readUpload(member, options, bytesOf(text), () => undefined);
}
const submitText = async (member: Member, text: string) => {
  const id = await draft(member, text);
  await submit(member, id, plan);
  return id;
};
/** Alkanes that no other has: C(n) to C(n + count - 1). */
const alkanes = (count: number, from = 2) =>
  Array.from({ length: count }, (_, n) => 'C'.repeat(from + n)).join('\n');

const isDraft = async (id: string) =>
  (await db.select().from(batches).where(eq(batches.id, id)))[0]?.submittedAt === null;

async function refused(submission: Promise<unknown>): Promise<LimitError> {
  const error = await submission.then(
    () => null,
    (cause: unknown) => cause,
  );
  expect(error).toBeInstanceOf(LimitError);
  return error as LimitError;
}

describe('setting limits', () => {
  it('is for leads, of their own team, and is in the record', async () => {
    const team = await newTeam();
    const other = await newTeam();
    await expect(setTeamLimits(team.modeler, { atoms: 50 })).rejects.toMatchObject({ status: 403 });
    await expect(
      setMemberLimits(team.lead, other.chemist.userId, { atoms: 50 }),
    ).rejects.toMatchObject({ status: 404 });
    await setTeamLimits(team.lead, { atoms: 50 });
    await setMemberLimits(team.lead, team.chemist.userId, { queuedTasks: 7 });
    expect((await limitsOf(team.chemist)).own).toEqual({
      ...defaultLimits,
      atoms: 50,
      queuedTasks: 7,
    });
    expect((await limitsOf(other.chemist)).own).toEqual(defaultLimits);
    const recorded = await db
      .select({ subject: events.subject, details: events.details })
      .from(events)
      .where(and(eq(events.teamId, team.lead.teamId), eq(events.action, 'change limits')))
      .orderBy(events.id);
    expect(recorded).toEqual([
      { subject: `team:${team.lead.teamId}`, details: { atoms: 50 } },
      { subject: `user:${team.chemist.userId}`, details: { queuedTasks: 7 } },
    ]);
    expect((await loadLimits(team.reader)).members).toEqual([]);
    expect((await loadLimits(team.lead)).members).toHaveLength(4);
  });

  it('goes no further than what is above, now or later', async () => {
    const { lead, chemist } = await newTeam();
    const fields = { queuedTasks: '', atoms: '', megabytes: '', months: '' };
    const schema = limitsFormSchema(ceilings);
    for (const bad of ['0', '-1', '1.5', 'many', String(ceilings.atoms + 1)]) {
      expect(schema.safeParse({ ...fields, atoms: bad }).success).toBe(false);
    }
    expect(schema.parse({ ...fields, atoms: ' 20 ' })).toEqual({ atoms: 20 });
    await setMemberLimits(lead, chemist.userId, { months: 30 });
    await setTeamLimits(lead, { months: 12 });
    expect((await limitsOf(chemist)).own.months).toBe(12);
    await setTeamLimits(lead, {});
    expect((await limitsOf(chemist)).own.months).toBe(30);
  });
});

describe('tasks queued at once', () => {
  it('refuses what is too much, says how much is left and who can help, and keeps the draft', async () => {
    const { lead, chemist } = await newTeam();
    await setTeamLimits(lead, { queuedTasks: 5 });
    await submitText(chemist, alkanes(3));
    const id = await draft(chemist, alkanes(3, 20));
    const { limit, message } = await refused(submit(chemist, id, plan));
    expect(limit).toBe('queuedTasks');
    expect(message).toContain('3 tasks');
    expect(message).toContain('the team may have 5');
    expect(message).toContain('2 are left');
    expect(message).toContain('A lead');
    expect(await isDraft(id)).toBe(true);
    expect(await db.$count(tasks, eq(tasks.batchId, id))).toBe(0);
    expect((await roomOf(chemist)).left.queuedTasks).toBe(2);
    await setTeamLimits(lead, { queuedTasks: 6 });
    await submit(chemist, id, plan);
    expect((await roomOf(chemist)).left.queuedTasks).toBe(0);
  });

  it('holds for a member beside the team, and for nobody else', async () => {
    const { lead, chemist, modeler } = await newTeam();
    await setMemberLimits(lead, chemist.userId, { queuedTasks: 1 });
    const { message } = await refused(submitText(chemist, alkanes(2)));
    expect(message).toContain('you may have 1');
    await submitText(modeler, alkanes(2));
    expect((await roomOf(chemist)).left.queuedTasks).toBe(1);
  });

  it('is not passed by two submissions at the same moment', async () => {
    const { lead, chemist, modeler } = await newTeam();
    await setTeamLimits(lead, { queuedTasks: 5 });
    const drafts = [
      [chemist, await draft(chemist, alkanes(3, 3))],
      [modeler, await draft(modeler, alkanes(3, 10))],
      [lead, await draft(lead, alkanes(3, 20))],
    ] as const;
    const outcomes = await Promise.allSettled(
      drafts.map(([member, id]) => submit(member, id, plan)),
    );
    expect(outcomes.map(({ status }) => status).sort()).toEqual([
      'fulfilled',
      'rejected',
      'rejected',
    ]);
    expect((await roomOf(lead)).left.queuedTasks).toBe(2);
  });

  it('counts tasks that are run again, and not those that are answered already', async () => {
    const { lead, modeler } = await newTeam();
    await setTeamLimits(lead, { queuedTasks: 2 });
    const first = await submitText(modeler, alkanes(2));
    await cancel(modeler, { batchId: first });
    const second = await submitText(modeler, alkanes(1, 12));
    await refused(rerun(modeler, { batchId: first }));
    await performAll(second);
    expect(await rerun(modeler, { batchId: first })).toBe(2);
    // Nothing is left, and nothing is needed: the answer is there.
    await submitText(modeler, alkanes(1, 12));
  });
});

describe('atoms in a molecule', () => {
  it('refuses a batch with a larger one and names it', async () => {
    const { lead, chemist } = await newTeam();
    await setTeamLimits(lead, { atoms: 14 });
    const id = await draft(chemist, 'CCCC butane\nCCCCC pentane\nCCCCCC hexane');
    const { limit, message } = await refused(submit(chemist, id, plan));
    expect(limit).toBe('atoms');
    expect(message).toContain('2 molecules have more than 14 atoms');
    expect(message).toContain('hexane with 20');
    expect(await isDraft(id)).toBe(true);
    await submitText(chemist, 'CCCC butane');
  });
});

describe('stored megabytes', () => {
  /** Makes what a team stores look as large as that. */
  const fill = (member: Member, megabytes: number) =>
    db
      .update(results)
      .set({ bytes: megabytes * 1_000_000 })
      .where(eq(results.teamId, member.teamId));
  const lettersAbout = async ({ userId }: Member, text: string) =>
    (
      await db
        .select({ subject: letters.subject })
        .from(letters)
        .innerJoin(users, eq(users.email, letters.address))
        .where(eq(users.id, userId))
    ).filter(({ subject }) => subject.includes(text)).length;

  it('are measured when a result is stored, for whom it was computed', async () => {
    const { chemist, modeler } = await newTeam();
    await performAll(await submitText(chemist, 'CCCC'));
    const [{ bytes, madeFor, molfile }] = await db
      .select()
      .from(results)
      .where(eq(results.teamId, chemist.teamId));
    // Butane has 14 atoms; a conformer of it takes 14 · 3 · 8 bytes.
    expect(bytes).toBeGreaterThan(molfile.length + 336);
    expect(madeFor).toBe(chemist.userId);
    await submitText(modeler, 'CCCC');
    const { members } = await loadLimits({ ...chemist, role: 'lead' });
    const stored = (id: string) => members.find((each) => each.id === id)?.used.megabytes;
    expect(stored(chemist.userId)).toBeCloseTo(bytes / 1e6);
    expect(stored(modeler.userId)).toBe(0);
  });

  it('refuse what would be computed once they are full', async () => {
    const { lead, chemist } = await newTeam();
    await performAll(await submitText(chemist, 'CCCC'));
    await setTeamLimits(lead, { megabytes: 10 });
    await fill(lead, 9);
    expect((await roomOf(chemist)).left.megabytes).toBeCloseTo(1);
    await fill(lead, 10);
    const id = await draft(chemist, 'CCCCC');
    const { limit, message } = await refused(submit(chemist, id, plan));
    expect(limit).toBe('megabytes');
    expect(message).toContain('10 MB');
    expect(await isDraft(id)).toBe(true);
  });

  it('are warned of once each time they come near the limit', async () => {
    const { lead, chemist } = await newTeam();
    await performAll(await submitText(chemist, 'CCCC'));
    await setTeamLimits(lead, { megabytes: 10 });
    const warned = () => lettersAbout(lead, 'of its storage');
    await fill(lead, 8);
    await warnOfStorage();
    expect(await warned()).toBe(0);
    await fill(lead, 9);
    await Promise.all([warnOfStorage(), warnOfStorage()]);
    await warnOfStorage();
    expect(await warned()).toBe(1);
    await setTeamLimits(lead, { megabytes: 20 });
    await warnOfStorage();
    await fill(lead, 19);
    await warnOfStorage();
    expect(await warned()).toBe(2);
    expect(await lettersAbout(chemist, 'of its storage')).toBe(0);
  });
});

describe('the REST interface', () => {
  const request = (count: number) =>
    newBatchSchema.parse({
      name: `By program ${randomUUID().slice(0, 4)}`,
      molecules: alkanes(count)
        .split('\n')
        .map((smiles) => ({ molecule: { smiles } })),
      plan: { conformers: {} },
    });

  it('answers a limit as a problem and leaves nothing behind', async () => {
    const { lead, chemist } = await newTeam();
    await setTeamLimits(lead, { queuedTasks: 2 });
    await expect(submitRequest(chemist, request(3))).rejects.toMatchObject({
      status: 429,
      body: { message: expect.stringContaining('2 are left') },
    });
    await setTeamLimits(lead, { atoms: 8 });
    await expect(submitRequest(chemist, request(3))).rejects.toMatchObject({ status: 403 });
    expect(await db.$count(batches, eq(batches.teamId, lead.teamId))).toBe(0);
  });
});
