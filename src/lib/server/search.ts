/** Searching the molecules of a team: by name, SMILES, substructure, state, kind of answer and batch. */
import { setImmediate as breathe } from 'node:timers/promises';
import { and, count, eq, sql, type SQL } from 'drizzle-orm';
import { LONGEST_SEARCH, type Search } from '../domain/search';
import { InputError, readMolecule, readPattern, type Pattern } from '../engine';
import { db } from './db';
import { batches, molecules } from './db/schema';
import type { Member } from './member';
import { describeMolecules, type FoundMolecule } from './search-rows';

export type { FoundMolecule } from './search-rows';

/** Most candidates of one page; more are not compared in its time anyway. */
const AT_ONCE = 1_000;
/** The event loop runs after comparing for this long, so that nobody else's page waits. */
const BREATH_MS = 10;
/** A page of a substructure search is answered after this long with what was found until then. */
export const BUDGET_MS = 200;

/** A field of the search that cannot be taken, in words for the person who filled it. */
export class SearchFault extends Error {
  constructor(
    readonly field: 'text' | 'structure',
    message: string,
  ) {
    super(message);
  }
}

export interface SearchAnswer {
  readonly rows: readonly FoundMolecule[];
  /** How many there are; null in a search for a structure, which only counts what it compares. */
  readonly total: number | null;
  /** For a structure: how many molecules from here on may hold it by their fingerprints, and how many were compared. */
  readonly candidates: number;
  readonly compared: number;
  /** The molecule after which the search goes on; null when everything was seen. */
  readonly next: string | null;
}

interface Clock {
  readonly now: () => number;
  /** How long a search for a structure may compare, milliseconds. */
  readonly budget: number;
}

/**
 * One page of the molecules that the search asks for, the newest first. Only molecules of submitted batches are found: a
 * draft is its maker's own. Throws SearchFault for a field that cannot be read.
 */
export async function search(
  member: Member,
  query: Search,
  pageSize: number,
  clock: Clock = { now: () => performance.now(), budget: BUDGET_MS },
): Promise<SearchAnswer> {
  const pattern = query.structure === '' ? null : readStructure(query.structure);
  const chosen = and(
    eq(molecules.teamId, member.teamId),
    inSubmittedBatch(member, query),
    textCondition(member, query),
    stateCondition(query),
    kindCondition(query),
    pattern
      ? sql`(${molecules.fingerprint} is null or ${molecules.fingerprint} & ${pattern.fingerprint}::bit(512) = ${pattern.fingerprint}::bit(512))`
      : undefined,
  )!;
  if (pattern) {
    const { ids, ...found } = await compare(member, chosen, pattern, query.after, pageSize, clock);
    return { rows: await describeMolecules(member, ids), total: null, ...found };
  }
  const [{ total }] = await db.select({ total: count() }).from(molecules).where(chosen);
  const ids = await readPage(chosen, query.page, pageSize);
  const rows = await describeMolecules(member, ids);
  return { rows, total, candidates: 0, compared: 0, next: null };
}

/** The batches that the search may choose from, the newest first. */
export function listBatchNames(member: Member, limit: number) {
  return db
    .select({ id: batches.id, name: batches.name })
    .from(batches)
    .where(and(eq(batches.teamId, member.teamId), sql`${batches.submittedAt} is not null`))
    .orderBy(sql`${batches.submittedAt} desc`)
    .limit(limit);
}

function readStructure(text: string): Pattern {
  try {
    return readPattern(text);
  } catch (error) {
    if (error instanceof InputError) throw new SearchFault('structure', error.message);
    throw error;
  }
}

function inSubmittedBatch({ teamId }: Member, { batch }: Search): SQL {
  const one = batch === null ? sql`` : sql`and b.id = ${batch}`;
  return sql`${molecules.id} in (select e.molecule_id from entries e join batches b on b.id = e.batch_id where b.team_id = ${teamId} and b.submitted_at is not null ${one})`;
}

/** A pattern of LIKE for a text that stands anywhere; its own signs mean themselves. */
function anywhere(text: string): string {
  return `%${text.replace(/[\\%_]/g, '\\$&')}%`;
}

/** The canonical SMILES of a text; null where it is none. */
function canonical(text: string): string | null {
  try {
    return readMolecule({ smiles: text }).smiles;
  } catch (error) {
    if (error instanceof InputError) return null;
    throw error;
  }
}

function textCondition({ teamId }: Member, { text, in: place }: Search): SQL | undefined {
  if (text === '') return undefined;
  if (text.length > LONGEST_SEARCH) {
    throw new SearchFault('text', `Write at most ${LONGEST_SEARCH} characters.`);
  }
  const byName = sql`select e.molecule_id from entries e join batches b on b.id = e.batch_id where b.team_id = ${teamId} and b.submitted_at is not null and e.name ilike ${anywhere(text)}`;
  const byPart = sql`select m.id from molecules m where m.team_id = ${teamId} and m.smiles like ${anywhere(text)}`;
  const whole = place === 'any' || place === 'exact' ? canonical(text) : null;
  const byWhole = sql`select m.id from molecules m where m.team_id = ${teamId} and m.smiles = ${whole}`;
  switch (place) {
    case 'name':
      return sql`${molecules.id} in (${byName})`;
    case 'part':
      return sql`${molecules.id} in (${byPart})`;
    case 'exact':
      if (whole === null) {
        throw new SearchFault(
          'text',
          'This is no SMILES of one molecule. Correct it, or search in names.',
        );
      }
      return sql`${molecules.id} in (${byWhole})`;
    case 'any':
      return sql`${molecules.id} in (${byName} union ${byPart} union ${byWhole})`;
  }
}

function stateCondition({ state, batch }: Search): SQL | undefined {
  if (state === null) return undefined;
  const one = batch === null ? sql`` : sql`and t.batch_id = ${batch}`;
  return sql`exists (select 1 from entries e join tasks t on t.entry_id = e.id where e.molecule_id = ${molecules.id} and t.state = ${state} ${one})`;
}

function kindCondition({ kind }: Search): SQL | undefined {
  if (kind === null) return undefined;
  return sql`exists (select 1 from results r where r.molecule_id = ${molecules.id} and r.kind = ${kind})`;
}

const newestFirst = sql`${molecules.createdAt} desc, ${molecules.id} desc`;

async function readPage(chosen: SQL, page: number, pageSize: number): Promise<string[]> {
  const rows = await db
    .select({ id: molecules.id })
    .from(molecules)
    .where(chosen)
    .orderBy(newestFirst)
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  return rows.map(({ id }) => id);
}

/** Compares candidates atom by atom until a page is full, none is left, or time is up. */
async function compare(
  member: Member,
  chosen: SQL,
  pattern: Pattern,
  after: string | null,
  pageSize: number,
  clock: Clock,
) {
  // The clock runs while the database screens, too: people wait for both.
  const end = clock.now() + clock.budget;
  const read = await readCandidates(member, chosen, after);
  const candidates = read[0]?.remaining ?? 0;
  const ids: string[] = [];
  let breath = clock.now() + BREATH_MS;
  for (const [place, { id, smiles }] of read.entries()) {
    if (pattern.isIn(smiles)) ids.push(id);
    const compared = place + 1;
    if (compared < candidates && (ids.length >= pageSize || clock.now() > end)) {
      return { ids, compared, candidates, next: id };
    }
    if (clock.now() > breath) {
      await breathe();
      breath = clock.now() + BREATH_MS;
    }
  }
  const last = read.length < candidates ? read[read.length - 1].id : null;
  return { ids, compared: read.length, candidates, next: last };
}

/** The next molecules that may hold a pattern, each with how many there are from here on. */
function readCandidates({ teamId }: Member, chosen: SQL, after: string | null) {
  const beyond =
    after === null
      ? undefined
      : sql`(${molecules.createdAt}, ${molecules.id}) < (select m.created_at, m.id from molecules m where m.id = ${after} and m.team_id = ${teamId})`;
  return db
    .select({
      id: molecules.id,
      smiles: molecules.smiles,
      remaining: sql<number>`(count(*) over ())::int`,
    })
    .from(molecules)
    .where(and(chosen, beyond))
    .orderBy(newestFirst)
    .limit(AT_ONCE);
}
