/**
 * The tables. Times carry their zone, every foreign key says what happens on deletion, and every list that a page
 * shows has an index in the order it is shown in. Nothing is stored twice: counts and states of a batch are read from
 * its tasks.
 */
import { sql } from 'drizzle-orm';
import {
  bigserial,
  boolean,
  check,
  customType,
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
  timestamp,
  unique,
  uuid,
  type AnyPgColumn,
} from 'drizzle-orm/pg-core';
import { energyUnits } from '../../domain/energy-units';
import { roles } from '../../domain/roles';
import { signInMethods } from '../../domain/sign-in-strength';
import { batchLetterChoices } from '../../domain/batch-letters';
import type { ApiScope } from '../../domain/api';
import type { LimitSettings } from '../../domain/limits';
import type { Rotor } from '../../domain/submission';

const bytes = customType<{ data: Uint8Array; driverData: Uint8Array }>({ dataType: () => 'bytea' });
/** A string of 512 digits 0 and 1, which the database combines with `&`. */
const bits512 = customType<{ data: string; driverData: string }>({ dataType: () => 'bit(512)' });
const moment = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });
const created = () => moment('created_at').notNull().defaultNow();

export const roleEnum = pgEnum('role', roles);
export const energyUnitEnum = pgEnum('energy_unit', energyUnits);
export const taskKindEnum = pgEnum('task_kind', [
  'conformers',
  'scan',
  'map',
  'conjugation',
  'strain',
  'opinion',
  'ranking',
  'heat',
]);
export const taskStateEnum = pgEnum('task_state', [
  'queued',
  'running',
  'done',
  'failed',
  'cancelled',
]);
export const verdictEnum = pgEnum('verdict', ['ready', 'warning', 'error']);
export const sourceEnum = pgEnum('batch_source', ['paste', 'draw', 'upload', 'program']);
export const structureFormatEnum = pgEnum('structure_format', ['smiles', 'molfile']);
export const signInMethodEnum = pgEnum('sign_in_method', signInMethods);
export const letterPurposeEnum = pgEnum('letter_purpose', ['confirm-address', 'reset-password']);
export const letterStateEnum = pgEnum('letter_state', [
  'waiting',
  'claimed',
  'handing-in',
  'sent',
  'unsure',
  'given-up',
  'expired',
]);
export const batchLettersEnum = pgEnum('batch_letters', batchLetterChoices);

/** People. The address is stored in lower case. */
export const users = pgTable(
  'users',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    email: text('email').notNull().unique(),
    name: text('name').notNull(),
    /** Null for who signs in by single sign-on only. */
    passwordHash: text('password_hash'),
    confirmedAt: moment('confirmed_at'),
    /** In which unit the person reads energies. */
    energyUnit: energyUnitEnum('energy_unit').notNull().default('kcal/mol'),
    /** Looks after the machines; set by `npm run operator` only. */
    isOperator: boolean('is_operator').notNull().default(false),
    /** When the person hears by letter that a batch of theirs has ended. */
    batchLetters: batchLettersEnum('batch_letters').notNull().default('each'),
    createdAt: created(),
  },
  (table) => [check('users_email_lower_case', sql`${table.email} = lower(${table.email})`)],
);

/** Sign-ins that have not ended; the cookie carries the id, and deleting or revoking the row ends it at once. */
export const sessions = pgTable(
  'sessions',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    userAgent: text('user_agent').notNull().default(''),
    address: text('address').notNull().default(''),
    createdAt: created(),
    seenAt: moment('seen_at').notNull().defaultNow(),
    expiresAt: moment('expires_at').notNull(),
    revokedAt: moment('revoked_at'),
    method: signInMethodEnum('method').notNull().default('password'),
    /** True when a second factor was shown, here or (as it says) at the identity provider. */
    withSecondFactor: boolean('with_second_factor').notNull().default(false),
    /** When the person last proved who they are; null where the identity provider did not say. */
    provedAt: moment('proved_at'),
  },
  (table) => [index('sessions_user').on(table.userId, table.seenAt)],
);

/** Sign-ins whose first factor was right and that wait for the code of the second. */
export const signInSteps = pgTable(
  'sign_in_steps',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    method: signInMethodEnum('method').notNull(),
    provedAt: moment('proved_at'),
    createdAt: created(),
    expiresAt: moment('expires_at').notNull(),
  },
  (table) => [index('sign_in_steps_user').on(table.userId)],
);

/** Time-based one-time passwords (RFC 6238), one for a person. */
export const secondFactors = pgTable('second_factors', {
  userId: uuid('user_id')
    .primaryKey()
    .references(() => users.id, { onDelete: 'cascade' }),
  /** Encrypted, see sealing.ts. */
  secret: text('secret').notNull(),
  /** Null until the first right code was given. */
  confirmedAt: moment('confirmed_at'),
  /** The time step of the last code that was taken: no code counts twice. */
  lastStep: integer('last_step').notNull().default(0),
  createdAt: created(),
});

/** Codes for who has lost the second factor, each good once; argon2id hashes. */
export const recoveryCodes = pgTable(
  'recovery_codes',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    codeHash: text('code_hash').notNull(),
    usedAt: moment('used_at'),
  },
  (table) => [index('recovery_codes_user').on(table.userId)],
);

/** Who somebody is at an identity provider: issuer and subject never change, addresses may. */
export const identities = pgTable(
  'identities',
  {
    issuer: text('issuer').notNull(),
    subject: text('subject').notNull(),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    createdAt: created(),
  },
  (table) => [
    primaryKey({ columns: [table.issuer, table.subject] }),
    unique('identities_one_of_a_provider').on(table.userId, table.issuer),
  ],
);

/** Single-use secrets sent by mail, stored as SHA-256 hashes. */
export const letterTokens = pgTable(
  'letter_tokens',
  {
    tokenHash: text('token_hash').primaryKey(),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    purpose: letterPurposeEnum('purpose').notNull(),
    createdAt: created(),
    expiresAt: moment('expires_at').notNull(),
    usedAt: moment('used_at'),
  },
  (table) => [index('letter_tokens_user').on(table.userId, table.purpose)],
);

/**
 * Letters on their way. A worker claims one, and marks it as being handed in just before its body goes to the mail
 * server: what stays in that state was perhaps delivered and is never sent again. The body is erased at the end.
 */
export const letters = pgTable(
  'letters',
  {
    /** Also the letter's Message-ID, so that a mail server knows a repeated one. */
    id: uuid('id').primaryKey().defaultRandom(),
    address: text('address').notNull(),
    subject: text('subject').notNull(),
    /** Null once the letter has ended: it may hold a secret. */
    text: text('text'),
    html: text('html'),
    state: letterStateEnum('state').notNull().default('waiting'),
    attempt: smallint('attempt').notNull().default(0),
    /** What stood in the way last. */
    reason: text('reason'),
    /** What it announces, where something waits for its delivery. */
    about: text('about'),
    createdAt: created(),
    /** After this moment it would say nothing true any more. */
    expiresAt: moment('expires_at').notNull(),
    claimedAt: moment('claimed_at'),
    endedAt: moment('ended_at'),
  },
  (table) => [
    index('letters_open')
      .on(table.createdAt)
      .where(sql`${table.endedAt} is null`),
    index('letters_state_ended').on(table.state, table.endedAt),
    index('letters_about')
      .on(table.about)
      .where(sql`${table.about} is not null`),
    check(
      'letters_ended_has_no_body',
      sql`(${table.endedAt} is null) = (${table.text} is not null) and (${table.text} is null) = (${table.html} is null)`,
    ),
  ],
);

/** Token buckets for sign-in and submission, shared by all web processes. */
export const rateBuckets = pgTable('rate_buckets', {
  key: text('key').primaryKey(),
  tokens: doublePrecision('tokens').notNull(),
  refilledAt: moment('refilled_at').notNull().defaultNow(),
});

export const teams = pgTable(
  'teams',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    name: text('name').notNull(),
    /** How members must have signed in to see the team's data. */
    requiresSecondFactor: boolean('requires_second_factor').notNull().default(false),
    requiresSingleSignOn: boolean('requires_single_sign_on').notNull().default(false),
    /** What a lead set; what is missing is the operator's default. */
    limits: jsonb('limits').$type<LimitSettings>().notNull().default({}),
    /** When its leads were told that the storage is nearly full; null while it is not. */
    storageWarnedAt: moment('storage_warned_at'),
    /** From when on the team may be deleted for good; null while nobody asked for it. */
    deletionAt: moment('deletion_at'),
    createdAt: created(),
  },
  (table) => [
    index('teams_deletion')
      .on(table.deletionAt)
      .where(sql`${table.deletionAt} is not null`),
  ],
);

export const memberships = pgTable(
  'memberships',
  {
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    role: roleEnum('role').notNull(),
    /** What a lead set for this member; what is missing is the team's. */
    limits: jsonb('limits').$type<LimitSettings>().notNull().default({}),
    createdAt: created(),
  },
  (table) => [
    primaryKey({ columns: [table.teamId, table.userId] }),
    index('memberships_user').on(table.userId),
  ],
);

/** Invitations to a team, bound to an address and good once; the secret itself is only in the letter. */
export const invitations = pgTable(
  'invitations',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    email: text('email').notNull(),
    role: roleEnum('role').notNull(),
    tokenHash: text('token_hash').notNull().unique(),
    invitedBy: uuid('invited_by').references(() => users.id, { onDelete: 'set null' }),
    createdAt: created(),
    expiresAt: moment('expires_at').notNull(),
    acceptedAt: moment('accepted_at'),
  },
  (table) => [
    index('invitations_team').on(table.teamId, table.createdAt),
    check('invitations_email_lower_case', sql`${table.email} = lower(${table.email})`),
  ],
);

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

/**
 * Links by which partners without an account see one batch or one molecule and take its bundle. The secret itself is
 * only in the link; revoking or expiry ends it at once.
 */
export const partnerLinks = pgTable(
  'partner_links',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    batchId: uuid('batch_id').references(() => batches.id, { onDelete: 'cascade' }),
    moleculeId: uuid('molecule_id').references(() => molecules.id, { onDelete: 'cascade' }),
    tokenHash: text('token_hash').notNull().unique(),
    /** argon2id; null where the link alone is enough. */
    passwordHash: text('password_hash'),
    createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
    createdAt: created(),
    expiresAt: moment('expires_at').notNull(),
    revokedAt: moment('revoked_at'),
    downloads: integer('downloads').notNull().default(0),
  },
  (table) => [
    index('partner_links_team').on(table.teamId, table.createdAt),
    check(
      'partner_links_one_subject',
      sql`(${table.batchId} is null) <> (${table.moleculeId} is null)`,
    ),
  ],
);

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

/** The external programs each worker has; a worker that falls silent no longer counts. */
export const workerPrograms = pgTable(
  'worker_programs',
  {
    worker: text('worker').notNull(),
    program: text('program').notNull(),
    version: text('version').notNull(),
    seenAt: moment('seen_at').notNull().defaultNow(),
  },
  (table) => [primaryKey({ columns: [table.worker, table.program] })],
);

/** Tokens by which programs ask in a person's name, in one team; the token itself is shown once. */
export const apiTokens = pgTable(
  'api_tokens',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    name: text('name').notNull(),
    tokenHash: text('token_hash').notNull().unique(),
    scopes: text('scopes').array().$type<readonly ApiScope[]>().notNull(),
    /** How its maker was signed in: a team may require more than a password of tokens, too. */
    method: signInMethodEnum('method').notNull().default('password'),
    withSecondFactor: boolean('with_second_factor').notNull().default(false),
    createdAt: created(),
    expiresAt: moment('expires_at').notNull(),
    usedAt: moment('used_at'),
  },
  (table) => [index('api_tokens_user').on(table.userId, table.createdAt)],
);

/** Answers to submissions that carried an idempotency key, so that a repeated one is answered and not done again. */
export const idempotentAnswers = pgTable(
  'idempotent_answers',
  {
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    key: text('key').notNull(),
    /** SHA-256 of the request, so that a key is not used for another one. */
    requestDigest: text('request_digest').notNull(),
    /** Null while the request is carried out. */
    answer: jsonb('answer'),
    createdAt: created(),
  },
  (table) => [
    primaryKey({ columns: [table.teamId, table.userId, table.key] }),
    index('idempotent_answers_created').on(table.createdAt),
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

/** Who did what to what, and when; rows are only ever added. */
export const events = pgTable(
  'events',
  {
    id: bigserial('id', { mode: 'number' }).primaryKey(),
    at: moment('at').notNull().defaultNow(),
    teamId: uuid('team_id').references(() => teams.id, { onDelete: 'cascade' }),
    actorId: uuid('actor_id').references(() => users.id, { onDelete: 'set null' }),
    action: text('action').notNull(),
    subject: text('subject').notNull(),
    /** Where the request came from; empty for what the product did by itself. */
    address: text('address').notNull().default(''),
    details: jsonb('details').notNull().default({}),
  },
  (table) => [index('events_team').on(table.teamId, table.id)],
);

/** Addresses of a team's own programs that are told of finished batches. */
export const webhooks = pgTable(
  'webhooks',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
    name: text('name').notNull(),
    url: text('url').notNull(),
    /** What signs the deliveries, sealed; the one before signs as well until its time is over. */
    secret: text('secret').notNull(),
    previousSecret: text('previous_secret'),
    previousUntil: moment('previous_until'),
    isOn: boolean('is_on').notNull().default(true),
    /** Since when every attempt failed; null after one that did not. */
    failingSince: moment('failing_since'),
    /** When the product switched it off by itself; null when people did, or when it is on. */
    givenUpAt: moment('given_up_at'),
    createdAt: created(),
  },
  (table) => [
    index('webhooks_team').on(table.teamId, table.createdAt),
    check(
      'webhooks_previous_secret_ends',
      sql`(${table.previousSecret} is null) = (${table.previousUntil} is null)`,
    ),
  ],
);

export const deliveryStateEnum = pgEnum('delivery_state', ['waiting', 'delivered', 'failed']);

/** What was, or is to be, told to a webhook, and how that went. The row is the truth; the queue only names it. */
export const webhookDeliveries = pgTable(
  'webhook_deliveries',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    webhookId: uuid('webhook_id')
      .notNull()
      .references(() => webhooks.id, { onDelete: 'cascade' }),
    event: text('event').notNull(),
    /** The JSON that is signed and sent, to the letter. */
    body: text('body').notNull(),
    state: deliveryStateEnum('state').notNull().default('waiting'),
    /** Attempts that ended, in all. */
    attempts: smallint('attempts').notNull().default(0),
    /** Attempts since it was last put in line, which set how long the next one waits. */
    step: smallint('step').notNull().default(0),
    createdAt: created(),
    /** When the next attempt is due; null when there is none. */
    nextAt: moment('next_at').defaultNow(),
    /** Set while an attempt is under way. */
    startedAt: moment('started_at'),
    /** The last attempt: when it ended, the status of the answer or the reason in words, how long it took. */
    attemptedAt: moment('attempted_at'),
    status: smallint('status'),
    reason: text('reason').notNull().default(''),
    milliseconds: integer('milliseconds'),
  },
  (table) => [
    index('webhook_deliveries_webhook').on(table.webhookId, table.createdAt),
    index('webhook_deliveries_created').on(table.createdAt),
    index('webhook_deliveries_waiting')
      .on(table.nextAt)
      .where(sql`${table.state} = 'waiting'`),
    check(
      'webhook_deliveries_waiting_has_next',
      sql`(${table.state} = 'waiting') = (${table.nextAt} is not null)`,
    ),
  ],
);

export const workerStateEnum = pgEnum('worker_state', ['taking', 'paused', 'draining', 'gone']);
export const workerOrderEnum = pgEnum('worker_order', ['take', 'pause', 'drain']);

/** Every worker that was seen, with its signs of life and what the operator wants of it. */
export const workers = pgTable(
  'workers',
  {
    name: text('name').primaryKey(),
    version: text('version').notNull(),
    concurrency: smallint('concurrency').notNull(),
    state: workerStateEnum('state').notNull().default('taking'),
    wanted: workerOrderEnum('wanted').notNull().default('take'),
    startedAt: moment('started_at').notNull().defaultNow(),
    beatAt: moment('beat_at').notNull().defaultNow(),
    /** Its metrics as of the last sign of life, for whoever collects them from the web. */
    metrics: jsonb('metrics').notNull().default([]),
  },
  (table) => [index('workers_beat').on(table.beatAt)],
);

/** What operators did to the machines, and when; rows are only ever added. */
export const operatorEvents = pgTable('operator_events', {
  id: bigserial('id', { mode: 'number' }).primaryKey(),
  at: moment('at').notNull().defaultNow(),
  /** Null for the command line. */
  actorId: uuid('actor_id').references(() => users.id, { onDelete: 'set null' }),
  action: text('action').notNull(),
  subject: text('subject').notNull(),
  address: text('address').notNull().default(''),
  details: jsonb('details').notNull().default({}),
});
