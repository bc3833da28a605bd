/** Workers, and what operators do with them. */
import {
  bigserial,
  index,
  jsonb,
  pgEnum,
  pgTable,
  smallint,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import type { InstalledVersions } from '../../../domain/second-opinions';
import { moment } from './columns';
import { users } from './people';

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
    /** Versions of the external programs on its machine, by name. */
    programs: jsonb('programs').$type<InstalledVersions>().notNull().default({}),
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
