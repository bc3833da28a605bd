/** Molecules, and the batches in which they were sent. */
import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  smallint,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import type { Rotor } from '../../../domain/submission';
import { bits512, moment, created } from './columns';
import { users } from './people';
import { teams } from './teams';

export const verdictEnum = pgEnum('verdict', ['ready', 'warning', 'error']);

export const sourceEnum = pgEnum('batch_source', ['paste', 'draw', 'upload', 'program']);

export const structureFormatEnum = pgEnum('structure_format', ['smiles', 'molfile']);

/**
 * Prepared structures of a team, as the engine takes them. A row without a geometry of its own is its canonical SMILES,
 * so that every spelling of a molecule is one structure; a molfile is kept with its atom order and geometry. `digest` is
 * the SHA-256 of format and structure; `smiles` is the identity shared by structures that differ only in those.
 */
export const molecules = pgTable(
  'molecules',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    digest: text('digest').notNull(),
    smiles: text('smiles').notNull(),
    formula: text('formula').notNull(),
    atomCount: smallint('atom_count').notNull(),
    /** The bonds that can be scanned: [{torsion: [i, j, k, l], conjugated, terminal}]. */
    rotors: jsonb('rotors').$type<readonly Rotor[]>().notNull(),
    format: structureFormatEnum('format').notNull(),
    structure: text('structure').notNull(),
    hasGeometry: boolean('has_geometry').notNull(),
    /** openchemlib's fragment keys, which screen for substructures; null until a worker has written them. */
    fingerprint: bits512('fingerprint'),
    createdAt: created(),
  },
  (table) => [
    unique('molecules_team_digest').on(table.teamId, table.digest),
    index('molecules_team_smiles').on(table.teamId, table.smiles),
    index('molecules_team_created').on(table.teamId, table.createdAt, table.id),
    index('molecules_smiles_parts').using('gin', table.smiles.op('gin_trgm_ops')),
    index('molecules_without_fingerprint')
      .on(table.createdAt)
      .where(sql`${table.fingerprint} is null`),
  ],
);

/** What a member submitted in one go. */
export const batches = pgTable(
  'batches',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
    name: text('name').notNull(),
    source: sourceEnum('source').notNull(),
    /** How rows were read, and what runs for each molecule, as the domain's schemas of a submission have them. */
    reading: jsonb('reading').notNull().default({}),
    plan: jsonb('plan'),
    createdAt: created(),
    /** Null while its maker still looks at the preview. */
    submittedAt: moment('submitted_at'),
    /** When the last of its tasks ended; null while one is open, also after some were run again. */
    finishedAt: moment('finished_at'),
    /** When its maker was told so, or did not want to be. */
    toldAt: moment('told_at'),
    /** While set, its results stay whatever their age. */
    pinnedAt: moment('pinned_at'),
    pinnedBy: uuid('pinned_by').references(() => users.id, { onDelete: 'set null' }),
    /** From when on its results may be removed, as letters announced; null while nothing is announced. */
    removalAt: moment('removal_at'),
    /** When its results were removed for their age. */
    removedAt: moment('removed_at'),
  },
  (table) => [
    index('batches_team_submitted').on(table.teamId, table.submittedAt),
    index('batches_untold')
      .on(table.finishedAt)
      .where(sql`${table.finishedAt} is not null and ${table.toldAt} is null`),
    index('batches_kept')
      .on(table.teamId, table.finishedAt)
      .where(sql`${table.removedAt} is null and ${table.pinnedAt} is null`),
    index('batches_drafts')
      .on(table.createdAt)
      .where(sql`${table.submittedAt} is null`),
    check(
      'batches_submitted_has_plan',
      sql`${table.submittedAt} is null or ${table.plan} is not null`,
    ),
  ],
);

/** The rows of a batch as given, good and bad; a bad row has no molecule and says why. */
export const entries = pgTable(
  'entries',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    batchId: uuid('batch_id')
      .notNull()
      .references(() => batches.id, { onDelete: 'cascade' }),
    position: integer('position').notNull(),
    /** Line of the input on which the row begins, from 1; null for a drawing. */
    line: integer('line'),
    name: text('name').notNull(),
    /** The row as given; null where that is the molecule's own structure to the letter. */
    input: text('input'),
    moleculeId: uuid('molecule_id').references(() => molecules.id),
    verdict: verdictEnum('verdict').notNull(),
    /** Warnings, or the error: [{code, message, line?, atom?}]. */
    remarks: jsonb('remarks').notNull().default([]),
    /** Bonds clicked on the drawing, [[j, k], …], where the plan scans chosen bonds. */
    chosenBonds: jsonb('chosen_bonds').notNull().default([]),
    /** The two bonds of a map, clicked on the drawing: [[j, k], [m, n]], or none. */
    mapBonds: jsonb('map_bonds').notNull().default([]),
  },
  (table) => [
    unique('entries_batch_position').on(table.batchId, table.position),
    index('entries_molecule').on(table.moleculeId),
    index('entries_remarked')
      .on(table.batchId, table.verdict)
      .where(sql`${table.verdict} <> 'ready'`),
    index('entries_name_parts').using('gin', table.name.op('gin_trgm_ops')),
    check(
      'entries_bad_row_has_no_molecule',
      sql`(${table.verdict} = 'error') = (${table.moleculeId} is null)`,
    ),
  ],
);
