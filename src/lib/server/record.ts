/** Reading the record of a team: who did what to what, when and from where. */
import { and, asc, desc, eq, gte, lt, sql } from 'drizzle-orm';
import { z } from 'zod';
import { csvLine } from '../domain/csv';
import { db } from './db';
import { events, users } from './db/schema';
import { require, type Member } from './member';

const PAGE_SIZE = 50;
const EXPORT_STEP = 1000;

const day = z.iso.date().optional().catch(undefined);

/** What narrows the record down, as an address carries it; what makes no sense there is left out. */
export const recordFilterSchema = z.object({
  actor: z.uuid().optional().catch(undefined),
  action: z.string().min(1).max(60).optional().catch(undefined),
  /** First and last day, UTC. */
  from: day,
  to: day,
  /** Only what is older than the event with this number. */
  before: z.coerce.number().int().positive().optional().catch(undefined),
});
export type RecordFilter = z.output<typeof recordFilterSchema>;

function matching(member: Member, { actor, action, from, to, before }: RecordFilter) {
  return and(
    eq(events.teamId, member.teamId),
    actor ? eq(events.actorId, actor) : undefined,
    action ? eq(events.action, action) : undefined,
    from ? gte(events.at, new Date(`${from}T00:00:00Z`)) : undefined,
    to ? lt(events.at, sql`${to}::date + interval '1 day'`) : undefined,
    before ? lt(events.id, before) : undefined,
  );
}

function select(member: Member, filter: RecordFilter, count: number) {
  return db
    .select({
      id: events.id,
      at: events.at,
      actor: users.name,
      actorEmail: users.email,
      action: events.action,
      subject: events.subject,
      address: events.address,
      details: events.details,
    })
    .from(events)
    .leftJoin(users, eq(users.id, events.actorId))
    .where(matching(member, filter))
    .orderBy(desc(events.id))
    .limit(count);
}

/** One page of the record, the newest first, and the number to go on before; null on the last page. */
export async function readPage(member: Member, filter: RecordFilter) {
  require(member, 'read the record');
  const rows = await select(member, filter, PAGE_SIZE + 1);
  const page = rows.slice(0, PAGE_SIZE);
  return { rows: page, next: rows.length > PAGE_SIZE ? page[PAGE_SIZE - 1].id : null };
}

/** The actions that the team's record holds, for choosing one. */
export async function listActions(member: Member): Promise<string[]> {
  require(member, 'read the record');
  const rows = await db
    .selectDistinct({ action: events.action })
    .from(events)
    .where(eq(events.teamId, member.teamId))
    .orderBy(asc(events.action));
  return rows.map(({ action }) => action);
}

/** The whole record as CSV, in pieces, the newest first. */
export async function* exportCsv(member: Member, filter: RecordFilter): AsyncGenerator<string> {
  require(member, 'read the record');
  yield csvLine(['at', 'who', 'address of who', 'action', 'subject', 'from where', 'details']);
  let { before } = filter;
  for (;;) {
    const rows = await select(member, { ...filter, before }, EXPORT_STEP);
    if (rows.length === 0) return;
    for (const row of rows) {
      const { at, actor, actorEmail, action, subject, address, details } = row;
      yield csvLine([
        at.toISOString(),
        actor,
        actorEmail,
        action,
        subject,
        address,
        JSON.stringify(details),
      ]);
    }
    before = rows[rows.length - 1].id;
  }
}
