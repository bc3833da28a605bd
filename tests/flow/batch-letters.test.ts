/** Letters about batches that ended: to their makers only, once for each end, as each person chose. */
import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, describe, expect, it } from 'vitest';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { chooseBatchLetters, tellOfFinished } from '$lib/server/batch-letters';
import { db } from '$lib/server/db';
import { batches, letters, tasks, users } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import * as memberships from '$lib/server/memberships';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { cancel, claim, fail, rerun } from '$lib/server/tasks';
import { bytesOf, performAll } from '../support/batches';
import { newTeam } from '../support/people';

afterAll(stopQueue);

async function newBatch(member: Member, text: string, plan: unknown = { conformers: {} }) {
  const name = `Batch ${randomUUID().slice(0, 6)}`;
  const reading = readingSchema.parse({});
  const options = { name, source: 'paste', format: 'smi', reading } as const;
  const id = await readUpload(member, options, bytesOf(text), () => undefined);
  await submit(member, id, planSchema.parse(plan));
  return { id, name };
}

/** The letters to a member that have been written, in their order. */
async function lettersTo({ userId }: Member) {
  return db
    .select({ subject: letters.subject, text: letters.text, html: letters.html })
    .from(letters)
    .innerJoin(users, eq(users.email, letters.address))
    .where(eq(users.id, userId))
    .orderBy(letters.createdAt);
}

const tasksOf = (batchId: string) => db.select().from(tasks).where(eq(tasks.batchId, batchId));
const broken = { code: 'unsupported-environment', message: 'No parameters for <boron>.' };

/** Ends every open task of a batch as failed, all at the same moment. */
async function failAll(batchId: string): Promise<void> {
  const claimed = await Promise.all(
    (await tasksOf(batchId))
      .filter(({ state }) => state === 'queued')
      .map(({ id }) => claim(id, 'a test')),
  );
  await Promise.all(claimed.map((task) => fail(task!, broken)));
}

describe('the end of a batch', () => {
  it('is told with counts, answers and reasons', { timeout: 120_000 }, async () => {
    const { chemist, lead } = await newTeam();
    const { id, name } = await newBatch(chemist, 'C=CC=C buta-1,3-diene\nnonsense', {
      conjugation: {},
    });
    await tellOfFinished();
    expect(await lettersTo(chemist)).toEqual([]);
    await performAll(id);
    await tellOfFinished();
    const [letter, ...more] = await lettersTo(chemist);
    expect(more).toEqual([]);
    expect(letter.subject).toBe(`“${name}” has ended`);
    expect(letter.text).toContain('1 task done');
    expect(letter.text).toContain('1 row could not be read');
    expect(letter.text).toMatch(
      /- buta-1,3-diene: C2–C3 by MMFF94s: s-trans is preferred by \d[.]\d kcal\/mol/,
    );
    expect(letter.text).toContain(`/batches/${id}`);
    expect(letter.html).toContain('s-trans is preferred');
    expect(await lettersTo(lead)).toEqual([]);
  });

  it('is told once, though the last tasks end at the same moment', async () => {
    const { chemist } = await newTeam();
    const { id, name } = await newBatch(chemist, 'CCCC a\nCCCCC b\nCCCCCC c\nCCCCCCC d\nCCO e');
    await failAll(id);
    await Promise.all([tellOfFinished(), tellOfFinished(), tellOfFinished()]);
    const [letter, ...more] = await lettersTo(chemist);
    expect(more).toEqual([]);
    expect(letter.subject).toBe(`“${name}” has ended, 5 failed`);
    expect(letter.text).toContain('5 tasks (a, b, c …): No parameters for <boron>.');
    expect(letter.html).not.toContain('<boron>');
  });

  it('is told again after tasks were run again, and not for nothing', async () => {
    const { chemist, modeler } = await newTeam();
    const { id } = await newBatch(chemist, 'CCCC\nCCCCC');
    await failAll(id);
    await tellOfFinished();
    expect(await rerun(modeler, { batchId: id })).toBe(2);
    await tellOfFinished();
    expect(await lettersTo(chemist)).toHaveLength(1);
    await performAll(id);
    await tellOfFinished();
    expect(await lettersTo(chemist)).toHaveLength(2);
    expect(await rerun(modeler, { batchId: id })).toBe(0);
    await tellOfFinished();
    expect(await lettersTo(chemist)).toHaveLength(2);
  });

  it('by hand is not told, unless only some rows were cancelled', async () => {
    const { chemist, modeler } = await newTeam();
    const whole = await newBatch(chemist, 'CCCC\nCCCCC');
    await cancel(modeler, { batchId: whole.id });
    await tellOfFinished();
    expect(await lettersTo(chemist)).toEqual([]);
    const partly = await newBatch(chemist, 'CCCC\nCCCCC');
    const [first, second] = await tasksOf(partly.id);
    await fail((await claim(first.id, 'a test'))!, broken);
    await cancel(modeler, { batchId: partly.id, rows: [second.entryId] });
    await tellOfFinished();
    expect(await lettersTo(chemist)).toHaveLength(1);
  });

  it('is not told to who has left the team, nor to who does not want letters', async () => {
    const { chemist, modeler, lead } = await newTeam();
    await chooseBatchLetters(modeler.userId, 'off');
    const [left, quiet] = [await newBatch(chemist, 'CCCC'), await newBatch(modeler, 'CCCC')];
    await memberships.remove(lead, chemist.userId);
    for (const { id } of [left, quiet]) await failAll(id);
    await tellOfFinished();
    // What was not told is not told later either.
    await chooseBatchLetters(modeler.userId, 'each');
    await tellOfFinished();
    const subjects = (await lettersTo(chemist)).map(({ subject }) => subject);
    expect(subjects).toHaveLength(1);
    expect(subjects[0]).toMatch(/^You are no longer in/);
    expect(await lettersTo(modeler)).toEqual([]);
  });
});

describe('the daily letter', () => {
  const at = (text: string) => new Date(`2026-11-30T${text}Z`);
  const finished = (id: string, when: Date) =>
    db.update(batches).set({ finishedAt: when }).where(eq(batches.id, id));

  it('sums up what ended before its hour, and comes once', async () => {
    const { chemist } = await newTeam();
    await chooseBatchLetters(chemist.userId, 'daily');
    const [first, second, later] = [
      await newBatch(chemist, 'CCCC'),
      await newBatch(chemist, 'CCCCC'),
      await newBatch(chemist, 'CCCCCC'),
    ];
    for (const { id } of [first, second, later]) await failAll(id);
    await finished(first.id, at('03:00:00'));
    await finished(second.id, at('06:59:00'));
    await finished(later.id, at('07:30:00'));
    await tellOfFinished(at('06:59:30'));
    expect(await lettersTo(chemist)).toEqual([]);
    await Promise.all([tellOfFinished(at('07:02:00')), tellOfFinished(at('07:02:00'))]);
    await tellOfFinished(at('23:00:00'));
    const [letter, ...more] = await lettersTo(chemist);
    expect(more).toEqual([]);
    expect(letter.subject).toBe('2 of your batches have ended');
    expect(letter.text).toContain(first.name);
    expect(letter.text).toContain(second.name);
    expect(letter.text).not.toContain(later.name);
    await tellOfFinished(new Date('2026-12-01T07:02:00Z'));
    expect((await lettersTo(chemist)).map(({ subject }) => subject)).toEqual([
      '2 of your batches have ended',
      'One of your batches has ended',
    ]);
  });
});
