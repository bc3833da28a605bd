/** People, how they sign in, and what keeps others from doing so. */
import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  doublePrecision,
  index,
  integer,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { energyUnits } from '../../../domain/energy-units';
import { signInMethods } from '../../../domain/sign-in-strength';
import { batchLetterChoices } from '../../../domain/batch-letters';
import { moment, created } from './columns';

export const energyUnitEnum = pgEnum('energy_unit', energyUnits);

export const batchLettersEnum = pgEnum('batch_letters', batchLetterChoices);

export const signInMethodEnum = pgEnum('sign_in_method', signInMethods);

export const letterPurposeEnum = pgEnum('letter_purpose', ['confirm-address', 'reset-password']);

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

/** Token buckets for sign-in and submission, shared by all web processes. */
export const rateBuckets = pgTable('rate_buckets', {
  key: text('key').primaryKey(),
  tokens: doublePrecision('tokens').notNull(),
  refilledAt: moment('refilled_at').notNull().defaultNow(),
});
