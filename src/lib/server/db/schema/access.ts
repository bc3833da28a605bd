/** Ways in for partners and programs. */
import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import type { ApiScope } from '../../../domain/api';
import { moment, created } from './columns';
import { signInMethodEnum, users } from './people';
import { teams } from './teams';
import { molecules, batches } from './molecules';

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
