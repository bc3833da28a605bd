/** Teams, who is in them, and their record. */
import { sql } from 'drizzle-orm';
import {
  bigserial,
  boolean,
  check,
  index,
  jsonb,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import { roles } from '../../../domain/roles';
import type { LimitSettings } from '../../../domain/limits';
import { moment, created } from './columns';
import { users } from './people';

export const roleEnum = pgEnum('role', roles);

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
