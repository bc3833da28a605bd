/** Letters on their way. */
import { sql } from 'drizzle-orm';
import { check, index, pgEnum, pgTable, smallint, text, uuid } from 'drizzle-orm/pg-core';
import { moment, created } from './columns';

export const letterStateEnum = pgEnum('letter_state', [
  'waiting',
  'claimed',
  'handing-in',
  'sent',
  'unsure',
  'given-up',
  'expired',
]);

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
