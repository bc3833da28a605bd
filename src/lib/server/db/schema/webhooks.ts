/** What a team's own programs are told. */
import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  index,
  integer,
  pgEnum,
  pgTable,
  smallint,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import { moment, created } from './columns';
import { users } from './people';
import { teams } from './teams';

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
