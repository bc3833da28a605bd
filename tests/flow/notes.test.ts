/** Notes: who may write, change, resolve and delete them, whom they name, and that other teams see nothing. */
import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { newNoteSchema } from '$lib/domain/notes';
import { planSchema, readingSchema } from '$lib/domain/submission';
import * as batches from '$lib/server/batches';
import { db } from '$lib/server/db';
import { events, users } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import { listen } from '$lib/server/live';
import type { Member } from '$lib/server/member';
import { board, list } from '$lib/server/note-board';
import * as notes from '$lib/server/notes';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { newTeam } from '../support/people';
import { until } from '../support/until';

afterAll(stopQueue);

let team: Awaited<ReturnType<typeof newTeam>>;
let stranger: Member;
let molecule: string;
let batchId: string;

async function* bytesOf(text: string) {
  yield new TextEncoder().encode(text);
}

const note = (text: string, parent: string | null = null, subject = 'molecule') =>
  newNoteSchema.parse({ text, parent: parent ?? '', subject });
const write = (member: Member, text: string, parent: string | null = null, subject?: string) =>
  notes.write(member, molecule, note(text, parent, subject));
const threadOf = async (member: Member, id: string) =>
  (await board(member, molecule)).threads.find((thread) => thread.id === id);
const openNotes = async () =>
  (
    await batches.listEntries(team.reader, batchId, {
      state: null,
      sort: 'position',
      descending: false,
      page: 1,
      pageSize: 5,
    })
  ).rows[0].openNotes;

beforeAll(async () => {
  team = await newTeam();
  stranger = (await newTeam()).lead;
  const reading = readingSchema.parse({});
  const options = { name: 'Noted', source: 'paste', format: 'smi', reading } as const;
  batchId = await readUpload(team.chemist, options, bytesOf('C=CC=C butadiene'), () => undefined);
  await submit(team.chemist, batchId, planSchema.parse({ conformers: {} }));
  const [row] = (await batches.listRows(team.chemist, batchId, 1, 1)).rows;
  molecule = row.moleculeId!;
}, 60_000);

describe('a note', () => {
  it('is written by chemists, read by everybody, and counted in lists while it is open', async () => {
    const before = await openNotes();
    const id = await write(team.chemist, 'Is **s-cis** right?');
    expect(await threadOf(team.reader, id)).toMatchObject({
      author: 'A chemist',
      html: '<p>Is <strong>s-cis</strong> right?</p>\n',
      mayEdit: false,
      mayRemove: false,
      resolvedBy: null,
    });
    expect(await openNotes()).toBe(before + 1);
    await notes.resolve(team.modeler, id, true);
    expect(await threadOf(team.reader, id)).toMatchObject({ resolvedBy: 'A modeler' });
    expect(await openNotes()).toBe(before);
    await notes.resolve(team.chemist, id, false);
    expect(await openNotes()).toBe(before + 1);
    expect((await board(team.reader, molecule)).mayWrite).toBe(false);
    await expect(write(team.reader, 'no')).rejects.toMatchObject({ status: 403 });
    await expect(notes.resolve(team.reader, id, true)).rejects.toMatchObject({ status: 403 });
  });

  it('is changed by its author only', async () => {
    const id = await write(team.chemist, 'first');
    await notes.edit(team.chemist, id, 'second');
    expect(await threadOf(team.chemist, id)).toMatchObject({ text: 'second', isEdited: true });
    for (const other of [team.modeler, team.lead, team.reader]) {
      await expect(notes.edit(other, id, 'third')).rejects.toMatchObject({ status: 403 });
    }
  });

  it('is deleted by its author or a lead, with its replies', async () => {
    const id = await write(team.chemist, 'to go');
    await write(team.modeler, 'with it', id);
    await expect(notes.remove(team.modeler, id)).rejects.toMatchObject({ status: 403 });
    await notes.remove(team.lead, id);
    expect(await threadOf(team.chemist, id)).toBeUndefined();
    const own = await write(team.chemist, 'own');
    await notes.remove(team.chemist, own);
    await expect(notes.remove(team.chemist, own)).rejects.toMatchObject({ status: 404 });
  });

  it('has replies one level deep, on its own molecule', async () => {
    const id = await write(team.chemist, 'question');
    const reply = await write(team.modeler, 'answer', id);
    expect((await threadOf(team.reader, id))!.replies.map((each) => each.id)).toEqual([reply]);
    await expect(write(team.chemist, 'deeper', reply)).rejects.toMatchObject({ status: 404 });
    await expect(notes.resolve(team.chemist, reply, true)).rejects.toMatchObject({ status: 404 });
    await expect(write(team.chemist, 'lost', randomUUID())).rejects.toMatchObject({ status: 404 });
  });

  it('can be about a bond that is there', async () => {
    const id = await write(team.chemist, 'the middle', null, 'bond:1-2');
    expect((await threadOf(team.reader, id))!.about).toBe('C2–C3');
    const { rows } = await list(team.reader, 'open', 1, 50);
    expect(rows.find((row) => row.id === id)).toMatchObject({
      about: 'C2–C3',
      molecule: 'butadiene',
    });
    const { subjects } = await board(team.chemist, molecule);
    expect(subjects.map(({ name }) => name)).toContain('Bond C2–C3');
    for (const subject of ['bond:0-3', 'bond:0-99', `conformer:${randomUUID()}:0`]) {
      await expect(write(team.chemist, 'x', null, subject), subject).rejects.toMatchObject({
        status: 404,
      });
    }
  });

  it('is recorded, and told to open pages', async () => {
    const heard: string[] = [];
    const stop = await listen('notes-changed', (id) => heard.push(id));
    const id = await write(team.chemist, 'news');
    await until('the news', async () => heard.includes(molecule));
    stop();
    const lines = await db.select().from(events).where(eq(events.subject, id));
    expect(lines).toMatchObject([{ action: 'write note', actorId: team.chemist.userId }]);
  });
});

describe('a mention', () => {
  it('finds its way to the person, under whatever name', async () => {
    const id = await write(team.chemist, 'Look, @A lead and @a MODELER!');
    const mine = async (member: Member) =>
      (await list(member, 'mentions', 1, 50)).rows.filter((row) => row.id === id);
    expect(await mine(team.lead)).toHaveLength(1);
    expect(await mine(team.modeler)).toHaveLength(1);
    expect(await mine(team.reader)).toEqual([]);
    await db.update(users).set({ name: 'Renamed' }).where(eq(users.id, team.lead.userId));
    expect((await threadOf(team.reader, id))!.html).toContain('@Renamed');
    expect((await threadOf(team.chemist, id))!.text).toContain('@Renamed');
    await notes.edit(team.chemist, id, 'never mind');
    expect(await mine(team.lead)).toEqual([]);
  });

  it('tells people with the same name apart by their addresses', async () => {
    const twins = await newTeam();
    await db.update(users).set({ name: 'A lead' }).where(eq(users.id, twins.modeler.userId));
    const reading = readingSchema.parse({});
    const options = { name: 'Twins', source: 'paste', format: 'smi', reading } as const;
    const batch = await readUpload(twins.chemist, options, bytesOf('CCCC'), () => undefined);
    await submit(twins.chemist, batch, planSchema.parse({ conformers: {} }));
    const own = (await batches.listRows(twins.chemist, batch, 1, 1)).rows[0].moleculeId!;
    const { people } = await board(twins.chemist, own);
    const { handle } = people.find(({ id }) => id === twins.modeler.userId)!;
    expect(handle).toContain('@people.example');
    await notes.write(twins.chemist, own, note(`@${handle} please`));
    expect((await list(twins.modeler, 'mentions', 1, 5)).total).toBe(1);
    expect((await list(twins.lead, 'mentions', 1, 5)).total).toBe(0);
  });

  it('of someone outside of the team is only text', async () => {
    const id = await write(team.chemist, `@{${stranger.userId}} secret`);
    expect((await list(stranger, 'mentions', 1, 5)).total).toBe(0);
    expect((await threadOf(team.reader, id))!.html).toContain('@a former member');
  });
});

describe('another team', () => {
  it('finds no molecule, no note and no list', async () => {
    const id = await write(team.chemist, 'internal');
    const gone = { status: 404 };
    await expect(board(stranger, molecule)).rejects.toMatchObject(gone);
    await expect(write(stranger, 'x')).rejects.toMatchObject(gone);
    await expect(notes.edit(stranger, id, 'x')).rejects.toMatchObject(gone);
    await expect(notes.remove(stranger, id)).rejects.toMatchObject(gone);
    await expect(notes.resolve(stranger, id, true)).rejects.toMatchObject(gone);
    expect(await list(stranger, 'open', 1, 50)).toEqual({ total: 0, rows: [] });
  });
});

describe('hostile notes', () => {
  it('come out without script, from the board and from the lists', async () => {
    for (const text of [
      '<script>alert(1)</script>',
      '[x](javascript:alert(1))',
      '<img src=x onerror=alert(1)>',
    ]) {
      const id = await write(team.chemist, text);
      const { html } = (await threadOf(team.reader, id))!;
      expect(html).not.toMatch(/<(script|img)|href="javascript/i);
      const listed = (await list(team.reader, 'open', 1, 50)).rows.find((row) => row.id === id)!;
      expect(listed.html).toBe(html);
    }
  });
});
