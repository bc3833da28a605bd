/** Notes on molecules: written, answered, resolved and taken back by members of a team. */
import { error } from '@sveltejs/kit';
import { and, eq, isNull, sql } from 'drizzle-orm';
import { mentionedIds, storeMentions, type NewNote, type NoteSubject } from '../domain/notes';
import { may } from '../domain/roles';
import { db, type Executor } from './db';
import { conformers, noteMentions, notes, results } from './db/schema';
import { recordEvent } from './events';
import { tell } from './live';
import { notFound, require, type Member } from './member';
import * as molecules from './molecules';
import { listPeople } from './people';

/** Writes a note on a molecule, or a reply to a thread of it; returns its id. */
export async function write(member: Member, moleculeId: string, note: NewNote): Promise<string> {
  require(member, 'write comments');
  const molecule = await molecules.get(member, moleculeId);
  const about = note.parent === null ? await placeOf(molecule, note.subject) : {};
  return db.transaction(async (transaction) => {
    if (note.parent !== null) await threadOf(transaction, member, molecule.id, note.parent);
    const people = await listPeople(member);
    const text = storeMentions(note.text, people);
    const [{ id }] = await transaction
      .insert(notes)
      .values({
        teamId: member.teamId,
        moleculeId: molecule.id,
        authorId: member.userId,
        parentId: note.parent,
        text,
        ...about,
      })
      .returning({ id: notes.id });
    await setMentions(transaction, id, mentionedIds(text, people));
    await record(transaction, member, 'write note', { id, moleculeId: molecule.id });
    return id;
  });
}

/** Changes the text of one's own note. */
export async function edit(member: Member, noteId: string, written: string): Promise<void> {
  require(member, 'write comments');
  await db.transaction(async (transaction) => {
    const note = await get(transaction, member, noteId);
    if (note.authorId !== member.userId) error(403, 'A note is changed only by its author.');
    const people = await listPeople(member);
    const text = storeMentions(written, people);
    await transaction
      .update(notes)
      .set({ text, editedAt: sql`now()` })
      .where(eq(notes.id, note.id));
    await transaction.delete(noteMentions).where(eq(noteMentions.noteId, note.id));
    await setMentions(transaction, note.id, mentionedIds(text, people));
    await record(transaction, member, 'edit note', note);
  });
}

/** Deletes one's own note with its replies; whose role allows it, anybody's. */
export async function remove(member: Member, noteId: string): Promise<void> {
  require(member, 'write comments');
  await db.transaction(async (transaction) => {
    const note = await get(transaction, member, noteId);
    if (note.authorId !== member.userId && !may(member.role, 'delete any comment')) {
      error(403, 'A note is deleted by its author or by a lead of the team.');
    }
    await transaction.delete(notes).where(eq(notes.id, note.id));
    await record(transaction, member, 'delete note', note);
  });
}

/** Marks a thread as resolved, or opens it again. */
export async function resolve(member: Member, noteId: string, resolved: boolean): Promise<void> {
  require(member, 'write comments');
  await db.transaction(async (transaction) => {
    const note = await get(transaction, member, noteId);
    await threadOf(transaction, member, note.moleculeId, note.id);
    await transaction
      .update(notes)
      .set(
        resolved
          ? { resolvedAt: sql`now()`, resolvedBy: member.userId }
          : { resolvedAt: null, resolvedBy: null },
      )
      .where(eq(notes.id, note.id));
    await record(transaction, member, resolved ? 'resolve note' : 'reopen note', note);
  });
}

async function get(executor: Executor, { teamId }: Member, noteId: string) {
  const [note] = await executor
    .select()
    .from(notes)
    .where(and(eq(notes.id, noteId), eq(notes.teamId, teamId)))
    .for('update');
  return note ?? notFound('note');
}

/** Makes sure that a note opens a thread on the molecule: replies are one level deep. */
async function threadOf(
  executor: Executor,
  { teamId }: Member,
  moleculeId: string,
  noteId: string,
): Promise<void> {
  const [thread] = await executor
    .select({ id: notes.id })
    .from(notes)
    .where(
      and(
        eq(notes.id, noteId),
        eq(notes.teamId, teamId),
        eq(notes.moleculeId, moleculeId),
        isNull(notes.parentId),
      ),
    );
  if (!thread) notFound('thread of notes on this molecule');
}

/** The columns of what a note is about, after a look whether the molecule has it. */
async function placeOf(molecule: Awaited<ReturnType<typeof molecules.get>>, subject: NoteSubject) {
  switch (subject.kind) {
    case 'molecule':
      return {};
    case 'bond': {
      const [a, b] = subject.atoms;
      const { neighbors } = molecules.readStored(molecule);
      if (!neighbors[a]?.some(({ atom }) => atom === b)) notFound('bond');
      return { bond: [a, b] };
    }
    case 'conformer': {
      const [found] = await db
        .select({ rank: conformers.rank })
        .from(conformers)
        .innerJoin(results, eq(results.id, conformers.resultId))
        .where(
          and(
            eq(results.id, subject.resultId),
            eq(results.moleculeId, molecule.id),
            eq(conformers.rank, subject.rank),
          ),
        );
      if (!found) notFound('conformer');
      return { resultId: subject.resultId, rank: subject.rank };
    }
  }
}

async function setMentions(executor: Executor, noteId: string, userIds: readonly string[]) {
  if (userIds.length === 0) return;
  await executor.insert(noteMentions).values(userIds.map((userId) => ({ noteId, userId })));
}

async function record(
  executor: Executor,
  member: Member,
  action: string,
  { id, moleculeId }: { readonly id: string; readonly moleculeId: string },
): Promise<void> {
  await recordEvent(executor, member, action, id, { moleculeId });
  await tell(executor, 'notes-changed', [moleculeId]);
}
