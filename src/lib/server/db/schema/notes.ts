/** What people write about molecules. */
import { sql } from 'drizzle-orm';
import {
  check,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
  uuid,
  type AnyPgColumn,
} from 'drizzle-orm/pg-core';
import { moment, created } from './columns';
import { users } from './people';
import { teams } from './teams';
import { molecules } from './molecules';
import { results } from './results';

/**
 * What people write about a molecule, or about one bond or conformer of it. A note without a parent opens a thread;
 * replies hang on it, one level deep, and only the thread is resolved. In the text a mention is `@{id of a user}`.
 */
export const notes = pgTable(
  'notes',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    moleculeId: uuid('molecule_id')
      .notNull()
      .references(() => molecules.id, { onDelete: 'cascade' }),
    parentId: uuid('parent_id').references((): AnyPgColumn => notes.id, { onDelete: 'cascade' }),
    authorId: uuid('author_id').references(() => users.id, { onDelete: 'set null' }),
    text: text('text').notNull(),
    /** The two atoms of the bond it is about, counted from 0. */
    bond: integer('bond').array(),
    /** The conformer it is about: the search that found it, and its place there from 0. */
    resultId: uuid('result_id').references(() => results.id, { onDelete: 'set null' }),
    rank: integer('rank'),
    createdAt: created(),
    editedAt: moment('edited_at'),
    resolvedAt: moment('resolved_at'),
    resolvedBy: uuid('resolved_by').references(() => users.id, { onDelete: 'set null' }),
  },
  (table) => [
    index('notes_molecule').on(table.moleculeId, table.createdAt),
    index('notes_parent').on(table.parentId),
    index('notes_team_open')
      .on(table.teamId, table.createdAt)
      .where(sql`${table.parentId} is null and ${table.resolvedAt} is null`),
    check('notes_bond_has_two_atoms', sql`cardinality(${table.bond}) = 2`),
    check(
      'notes_replies_are_plain',
      sql`${table.parentId} is null or (${table.resolvedAt} is null and ${table.bond} is null and ${table.rank} is null)`,
    ),
  ],
);

/** Whom a note names. */
export const noteMentions = pgTable(
  'note_mentions',
  {
    noteId: uuid('note_id')
      .notNull()
      .references(() => notes.id, { onDelete: 'cascade' }),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
  },
  (table) => [
    primaryKey({ columns: [table.noteId, table.userId] }),
    index('note_mentions_user').on(table.userId),
  ],
);
