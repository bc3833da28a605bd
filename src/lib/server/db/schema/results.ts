/** Tasks, and what came of them. */
import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  doublePrecision,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  primaryKey,
  real,
  smallint,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { taskKinds } from '../../../domain/labels';
import { bytes, moment, created } from './columns';
import { users } from './people';
import { teams } from './teams';
import { molecules, batches, entries } from './molecules';

export const taskKindEnum = pgEnum('task_kind', taskKinds);

export const taskStateEnum = pgEnum('task_state', [
  'queued',
  'running',
  'done',
  'failed',
  'cancelled',
]);

/** Stored answers, one for each team, molecule, kind, settings and engine version. */
export const results = pgTable(
  'results',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    moleculeId: uuid('molecule_id')
      .notNull()
      .references(() => molecules.id, { onDelete: 'cascade' }),
    kind: taskKindEnum('kind').notNull(),
    settings: jsonb('settings').notNull(),
    settingsDigest: text('settings_digest').notNull(),
    engineVersion: text('engine_version').notNull(),
    /** The energy model that all of it rests on; further models of a profile are in profile_curves. */
    model: text('model').notNull(),
    /** The prepared molecule in its final atom order, V2000, with the answer's main geometry. */
    molfile: text('molfile').notNull(),
    /** All that is neither a conformer nor a profile: conjugated bonds, strain, flags of completeness. */
    details: jsonb('details').notNull(),
    warnings: jsonb('warnings').notNull().default([]),
    seconds: doublePrecision('seconds').notNull(),
    /** For whom it was computed first: it counts against their limit. */
    madeFor: uuid('made_for').references(() => users.id, { onDelete: 'set null' }),
    /** What it takes in the database with all that hangs on it. */
    bytes: integer('bytes').notNull().default(0),
    createdAt: created(),
  },
  (table) => [
    index('results_stored').on(table.teamId, table.madeFor, table.bytes),
    unique('results_identity').on(
      table.moleculeId,
      table.kind,
      table.settingsDigest,
      table.engineVersion,
    ),
    index('results_team_created').on(table.teamId, table.createdAt),
  ],
);

/** Conformers of a result, lowest first; coordinates are packed little-endian float64, 3 an atom, Å. */
export const conformers = pgTable(
  'conformers',
  {
    resultId: uuid('result_id')
      .notNull()
      .references(() => results.id, { onDelete: 'cascade' }),
    rank: integer('rank').notNull(),
    energy: doublePrecision('energy').notNull(),
    relative: doublePrecision('relative').notNull(),
    degeneracy: integer('degeneracy').notNull(),
    population: doublePrecision('population').notNull(),
    rmsdToLowest: doublePrecision('rmsd_to_lowest').notNull(),
    coordinates: bytes('coordinates').notNull(),
    /** {modes, flaw} as the engine gives them; null in results of versions before 0.3. */
    vibrations: jsonb('vibrations'),
  },
  (table) => [primaryKey({ columns: [table.resultId, table.rank] })],
);

/** The grid of one torsion that a result scanned. */
export const profiles = pgTable(
  'profiles',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    resultId: uuid('result_id')
      .notNull()
      .references(() => results.id, { onDelete: 'cascade' }),
    /** The four atoms, counted from 0 in the prepared molecule. */
    torsion: integer('torsion').array().notNull(),
    angles: doublePrecision('angles').array().notNull(),
  },
  (table) => [index('profiles_result').on(table.resultId)],
);

/**
 * One energy model's curve over a profile's grid; several models can stand side by side. The curve of the result's own
 * model is the scan; those of other models are second opinions, written by the task whose result they name.
 */
export const profileCurves = pgTable(
  'profile_curves',
  {
    profileId: uuid('profile_id')
      .notNull()
      .references(() => profiles.id, { onDelete: 'cascade' }),
    model: text('model').notNull(),
    relaxed: boolean('relaxed').notNull(),
    /** The result of the opinion that the curve belongs to; null for the scan itself. */
    opinionId: uuid('opinion_id').references(() => results.id, { onDelete: 'cascade' }),
    /** kcal/mol; NaN where the model gave no point, for which the opinion's details have the reason. */
    energies: doublePrecision('energies').array().notNull(),
    reached: doublePrecision('reached').array().notNull(),
    /** Packed as a conformer's: the geometries of the angles in their order, then those of the stationary points. */
    coordinates: bytes('coordinates').notNull(),
    /** [{kind, angle, relative, label, …}] as the engine gives them. */
    stationary: jsonb('stationary').notNull(),
    createdAt: created(),
  },
  (table) => [
    primaryKey({ columns: [table.profileId, table.model, table.relaxed] }),
    index('profile_curves_opinion').on(table.opinionId),
  ],
);

/** The energy over two torsions that a result mapped. */
export const maps = pgTable('maps', {
  resultId: uuid('result_id')
    .primaryKey()
    .references(() => results.id, { onDelete: 'cascade' }),
  /** The two torsions, each as its four atoms counted from 0. */
  torsions: jsonb('torsions').notNull(),
  /** Degrees between two cells, and cells along each side. */
  step: doublePrecision('step').notNull(),
  perAxis: smallint('per_axis').notNull(),
  /** kcal/mol, row by row; null where time ran out before the cell was reached. */
  energies: jsonb('energies').notNull(),
  /** Packed as a conformer's: the geometries of the cells that were reached, then those of the minima. */
  coordinates: bytes('coordinates').notNull(),
  /** [{angles, energy, cell}] as the engine gives them, lowest first. */
  minima: jsonb('minima').notNull(),
});

/** One computation of one entry. The row is the only truth shown to people; the queue's own state is plumbing. */
export const tasks = pgTable(
  'tasks',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    batchId: uuid('batch_id')
      .notNull()
      .references(() => batches.id, { onDelete: 'cascade' }),
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entries.id, { onDelete: 'cascade' }),
    kind: taskKindEnum('kind').notNull(),
    settings: jsonb('settings').notNull(),
    state: taskStateEnum('state').notNull().default('queued'),
    /** Counts the times a worker began; a worker that no longer holds the current attempt may not write. */
    attempt: smallint('attempt').notNull().default(0),
    progress: real('progress').notNull().default(0),
    stage: text('stage').notNull().default(''),
    worker: text('worker'),
    /** {code, message, atom?, line?} where the state is 'failed'. */
    error: jsonb('error'),
    resultId: uuid('result_id').references(() => results.id, { onDelete: 'set null' }),
    /** True when the answer was there already and nothing was computed for this task. */
    reused: boolean('reused').notNull().default(false),
    createdAt: created(),
    /** When it last began to wait: at first with its batch, later by being run again. */
    queuedAt: moment('queued_at').notNull().defaultNow(),
    startedAt: moment('started_at'),
    /** The worker's last sign of life. */
    beatAt: moment('beat_at'),
    finishedAt: moment('finished_at'),
  },
  (table) => [
    index('tasks_batch_state').on(table.batchId, table.state),
    index('tasks_entry').on(table.entryId),
    index('tasks_done')
      .on(table.batchId, table.finishedAt)
      .where(sql`${table.state} = 'done'`),
    index('tasks_result').on(table.resultId),
    index('tasks_running')
      .on(table.beatAt)
      .where(sql`${table.state} = 'running'`),
    index('tasks_queued')
      .on(table.queuedAt)
      .where(sql`${table.state} = 'queued'`),
    index('tasks_failed')
      .on(table.finishedAt)
      .where(sql`${table.state} = 'failed'`),
    check('tasks_progress_range', sql`${table.progress} between 0 and 1`),
    check('tasks_failed_says_why', sql`(${table.state} = 'failed') = (${table.error} is not null)`),
  ],
);
