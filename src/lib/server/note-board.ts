/** Notes as pages show them: the threads of a molecule, and lists over the team. */
import { asc, eq, sql, type SQL } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import { subjectValue, writeMentions, type Person } from '../domain/notes';
import { may } from '../domain/roles';
import { atomLabel, type Molecule } from '../engine';
import { db } from './db';
import { notes, users } from './db/schema';
import type { Member } from './member';
import * as molecules from './molecules';
import { renderNote } from './note-text';
import { listPeople } from './people';

/** Conformers that a note can be pinned to, the lowest first. */
const MOST_CONFORMERS = 50;

/** A note as it is shown; times as ISO texts, so that it travels as JSON too. */
export interface ShownNote {
  readonly id: string;
  readonly author: string;
  /** Safe HTML. */
  readonly html: string;
  /** As its author wrote it; empty for what the member may not change. */
  readonly text: string;
  /** What it is about: "C2–C3", "Conformer 1"; null for the whole molecule. */
  readonly about: string | null;
  readonly createdAt: string;
  readonly isEdited: boolean;
  readonly resolvedBy: string | null;
  readonly mayEdit: boolean;
  readonly mayRemove: boolean;
}

export interface Thread extends ShownNote {
  readonly replies: readonly ShownNote[];
}

export interface NoteBoard {
  readonly threads: readonly Thread[];
  readonly people: readonly Person[];
  /** What a note can be about, with the value that stands for it. */
  readonly subjects: readonly { readonly value: string; readonly name: string }[];
  readonly mayWrite: boolean;
}

const authors = alias(users, 'authors');
const resolvers = alias(users, 'resolvers');

/** All notes on a molecule of the member's team, the oldest thread first, and what a new one needs. */
export async function board(member: Member, moleculeId: string): Promise<NoteBoard> {
  const stored = await molecules.get(member, moleculeId);
  const molecule = molecules.readStored(stored);
  const people = await listPeople(member);
  const rows = await db
    .select({ note: notes, author: authors.name, resolver: resolvers.name })
    .from(notes)
    .leftJoin(authors, eq(authors.id, notes.authorId))
    .leftJoin(resolvers, eq(resolvers.id, notes.resolvedBy))
    .where(eq(notes.moleculeId, stored.id))
    .orderBy(asc(notes.createdAt), asc(notes.id));
  const show = ({ note, author, resolver }: (typeof rows)[number]): ShownNote => {
    const isOwn = note.authorId === member.userId && may(member.role, 'write comments');
    return {
      id: note.id,
      author: author ?? 'a former member',
      html: renderNote(note.text, people),
      text: isOwn ? writeMentions(note.text, people) : '',
      about: aboutText(molecule, note.bond, note.rank),
      createdAt: note.createdAt.toISOString(),
      isEdited: note.editedAt !== null,
      resolvedBy: note.resolvedAt === null ? null : (resolver ?? 'a former member'),
      mayEdit: isOwn,
      mayRemove: isOwn || may(member.role, 'delete any comment'),
    };
  };
  return {
    threads: rows
      .filter(({ note }) => note.parentId === null)
      .map((thread) => ({
        ...show(thread),
        replies: rows.filter(({ note }) => note.parentId === thread.note.id).map(show),
      })),
    people,
    subjects: await subjectsOf(molecule, stored.id),
    mayWrite: may(member.role, 'write comments'),
  };
}

function bondText({ atomicNumbers }: Molecule, atoms: readonly number[]): string {
  return atoms.map((atom) => atomLabel(atomicNumbers[atom], atom)).join('–');
}

function aboutText(molecule: Molecule, bond: number[] | null, rank: number | null): string | null {
  if (bond) return bondText(molecule, bond);
  return rank === null ? null : `Conformer ${rank + 1}`;
}

async function subjectsOf(molecule: Molecule, moleculeId: string): Promise<NoteBoard['subjects']> {
  const [newest] = await db.execute<{ id: string; size: number }>(sql`
    select r.id, (select count(*)::int from conformers c where c.result_id = r.id) as size
    from results r where r.molecule_id = ${moleculeId} and r.kind = 'conformers'
    order by r.created_at desc limit 1`);
  const isHeavy = (atom: number) => molecule.atomicNumbers[atom] > 1;
  return [
    { value: 'molecule', name: 'The whole molecule' },
    ...molecule.bonds
      .filter(({ a, b }) => isHeavy(a) && isHeavy(b))
      .map(({ a, b }) => ({
        value: subjectValue({ kind: 'bond', atoms: [a, b] }),
        name: `Bond ${bondText(molecule, [a, b])}`,
      })),
    ...Array.from({ length: Math.min(newest?.size ?? 0, MOST_CONFORMERS) }, (_, rank) => ({
      value: subjectValue({ kind: 'conformer', resultId: newest.id, rank }),
      name: `Conformer ${rank + 1}`,
    })),
  ];
}

/** A note in a list over many molecules. */
export interface ListedNote {
  readonly id: string;
  readonly moleculeId: string;
  readonly molecule: string;
  readonly about: string | null;
  readonly author: string;
  readonly html: string;
  readonly createdAt: string;
  readonly isResolved: boolean;
  readonly replies: number;
}

export const noteLists = ['mentions', 'open'] as const;
export type NoteList = (typeof noteLists)[number];

/** One page of the notes that name the member, or of the team's open threads; the newest first. */
export async function list(member: Member, which: NoteList, page: number, pageSize: number) {
  const chosen = conditionOf(member, which);
  const [{ total }] = await db.execute<{ total: number }>(
    sql`select count(*)::int as total from notes n where ${chosen}`,
  );
  const people = await listPeople(member);
  const rows = await db.execute<{
    id: string;
    molecule_id: string;
    molecule: string;
    bond: number[] | null;
    rank: number | null;
    author: string | null;
    text: string;
    created_at: string;
    resolved: boolean;
    replies: number;
  }>(sql`
    select n.id, n.molecule_id, n.bond, n.rank, n.text, n.created_at, u.name as author,
      coalesce(parent.resolved_at, n.resolved_at) is not null as resolved,
      (select count(*)::int from notes r where r.parent_id = n.id) as replies,
      coalesce((select e.name from entries e join batches b on b.id = e.batch_id
        where e.molecule_id = n.molecule_id and b.submitted_at is not null
        order by b.submitted_at desc, e.position limit 1), m.formula) as molecule
    from notes n
    join molecules m on m.id = n.molecule_id
    left join notes parent on parent.id = n.parent_id
    left join users u on u.id = n.author_id
    where ${chosen}
    order by n.created_at desc, n.id desc
    limit ${pageSize} offset ${(page - 1) * pageSize}`);
  const shown: ListedNote[] = [];
  for (const row of rows) {
    shown.push({
      id: row.id,
      moleculeId: row.molecule_id,
      molecule: row.molecule,
      about: row.bond
        ? bondText(molecules.readStored(await molecules.get(member, row.molecule_id)), row.bond)
        : row.rank === null
          ? null
          : `Conformer ${row.rank + 1}`,
      author: row.author ?? 'a former member',
      html: renderNote(row.text, people),
      createdAt: new Date(row.created_at).toISOString(),
      isResolved: row.resolved,
      replies: row.replies,
    });
  }
  return { total, rows: shown };
}

function conditionOf({ teamId, userId }: Member, which: NoteList): SQL {
  return which === 'mentions'
    ? sql`n.team_id = ${teamId} and exists (select 1 from note_mentions x where x.note_id = n.id and x.user_id = ${userId})`
    : sql`n.team_id = ${teamId} and n.parent_id is null and n.resolved_at is null`;
}
