/** The tables of a team's export, line by line as CSV. */
import { and, asc, eq, gt, isNotNull, sql } from 'drizzle-orm';
import { csvLine } from '../domain/csv';
import { db } from './db';
import {
  batches,
  entries,
  memberships,
  molecules,
  notes,
  partnerLinks,
  tasks,
  users,
} from './db/schema';

/** Rows read at once, so that memory does not grow with the team. */
const STEP = 500;

/** Rows of a table that has an id, step by step in the order of their ids. */
async function* stepwise<Row extends { readonly id: string }>(
  read: (after: string) => Promise<Row[]>,
): AsyncGenerator<Row> {
  let after = '00000000-0000-0000-0000-000000000000';
  for (;;) {
    const rows = await read(after);
    yield* rows;
    if (rows.length < STEP) return;
    after = rows[rows.length - 1].id;
  }
}

const moment = (at: Date | null): string => at?.toISOString() ?? '';

/** Every submitted batch of a team. */
export function submitted(teamId: string) {
  return stepwise((after) =>
    db
      .select({
        id: batches.id,
        name: batches.name,
        source: batches.source,
        maker: users.email,
        submittedAt: batches.submittedAt,
        finishedAt: batches.finishedAt,
        pinnedAt: batches.pinnedAt,
        removedAt: batches.removedAt,
        plan: batches.plan,
        reading: batches.reading,
      })
      .from(batches)
      .leftJoin(users, eq(users.id, batches.createdBy))
      .where(and(eq(batches.teamId, teamId), isNotNull(batches.submittedAt), gt(batches.id, after)))
      .orderBy(asc(batches.id))
      .limit(STEP),
  );
}

/** Batches with their folders in the export. */
export async function* batchLines(
  teamId: string,
  folders: ReadonlyMap<string, string>,
): AsyncGenerator<string> {
  yield csvLine([
    'id',
    'name',
    'folder',
    'source',
    'submitted by',
    'submitted at',
    'ended at',
    'pinned at',
    'results removed at',
    'plan',
    'reading',
  ]);
  for await (const batch of submitted(teamId)) {
    const { id, name, source, maker, submittedAt, finishedAt, pinnedAt, removedAt } = batch;
    // A batch that was submitted while the export ran has no folder.
    const folder = folders.get(id);
    if (folder === undefined) continue;
    const times = [submittedAt, finishedAt, pinnedAt, removedAt].map(moment);
    const settings = [batch.plan, batch.reading].map((value) => JSON.stringify(value));
    yield csvLine([id, name, folder, source, maker, ...times, ...settings]);
  }
}

/** The rows of a batch with their tasks. */
export async function* rowLines(batchId: string): AsyncGenerator<string> {
  yield csvLine([
    'row',
    'line',
    'name',
    'verdict',
    'remarks',
    'input',
    'smiles',
    'molecule',
    'tasks',
  ]);
  let after = 0;
  for (;;) {
    const rows = await db
      .select({
        position: entries.position,
        line: entries.line,
        name: entries.name,
        verdict: entries.verdict,
        remarks: entries.remarks,
        input: entries.input,
        smiles: molecules.smiles,
        moleculeId: entries.moleculeId,
        tasks: sql<unknown>`(select json_agg(json_build_object('kind', t.kind, 'state', t.state, 'settings', t.settings, 'error', t.error) order by t.created_at, t.id) from ${tasks} t where t.entry_id = "entries"."id")`,
      })
      .from(entries)
      .leftJoin(molecules, eq(molecules.id, entries.moleculeId))
      .where(and(eq(entries.batchId, batchId), gt(entries.position, after)))
      .orderBy(asc(entries.position))
      .limit(STEP);
    for (const row of rows) {
      const { position, line, name, verdict, remarks, input, smiles, moleculeId } = row;
      yield csvLine([
        position,
        line,
        name,
        verdict,
        JSON.stringify(remarks),
        input,
        smiles,
        moleculeId,
        JSON.stringify(row.tasks ?? []),
      ]);
    }
    if (rows.length < STEP) return;
    after = rows[rows.length - 1].position;
  }
}

/** Who belongs to the team. */
export async function* memberLines(teamId: string): AsyncGenerator<string> {
  yield csvLine(['name', 'address', 'role', 'since', 'limits']);
  const rows = await db
    .select({
      name: users.name,
      email: users.email,
      role: memberships.role,
      since: memberships.createdAt,
      limits: memberships.limits,
    })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.teamId, teamId))
    .orderBy(asc(users.name), asc(users.id));
  for (const { name, email, role, since, limits } of rows) {
    yield csvLine([name, email, role, moment(since), JSON.stringify(limits)]);
  }
}

/** What people wrote. */
export async function* noteLines(teamId: string): AsyncGenerator<string> {
  yield csvLine([
    'id',
    'molecule',
    'answer to',
    'author',
    'written at',
    'edited at',
    'resolved at',
    'bond',
    'text',
  ]);
  const rows = stepwise((after) =>
    db
      .select({
        id: notes.id,
        moleculeId: notes.moleculeId,
        parentId: notes.parentId,
        author: users.email,
        createdAt: notes.createdAt,
        editedAt: notes.editedAt,
        resolvedAt: notes.resolvedAt,
        bond: notes.bond,
        text: notes.text,
      })
      .from(notes)
      .leftJoin(users, eq(users.id, notes.authorId))
      .where(and(eq(notes.teamId, teamId), gt(notes.id, after)))
      .orderBy(asc(notes.id))
      .limit(STEP),
  );
  for await (const { id, moleculeId, parentId, author, bond, text, ...times } of rows) {
    const { createdAt, editedAt, resolvedAt } = times;
    const atoms = bond?.map((atom) => atom + 1).join('-') ?? '';
    yield csvLine([
      id,
      moleculeId,
      parentId,
      author,
      ...[createdAt, editedAt, resolvedAt].map(moment),
      atoms,
      text,
    ]);
  }
}

/** Partner links, without their secrets. */
export async function* linkLines(teamId: string): AsyncGenerator<string> {
  yield csvLine([
    'id',
    'batch',
    'molecule',
    'made by',
    'made at',
    'good until',
    'revoked at',
    'downloads',
  ]);
  const rows = stepwise((after) =>
    db
      .select({
        id: partnerLinks.id,
        batchId: partnerLinks.batchId,
        moleculeId: partnerLinks.moleculeId,
        maker: users.email,
        createdAt: partnerLinks.createdAt,
        expiresAt: partnerLinks.expiresAt,
        revokedAt: partnerLinks.revokedAt,
        downloads: partnerLinks.downloads,
      })
      .from(partnerLinks)
      .leftJoin(users, eq(users.id, partnerLinks.createdBy))
      .where(and(eq(partnerLinks.teamId, teamId), gt(partnerLinks.id, after)))
      .orderBy(asc(partnerLinks.id))
      .limit(STEP),
  );
  for await (const {
    id,
    batchId,
    moleculeId,
    maker,
    createdAt,
    expiresAt,
    revokedAt,
    downloads,
  } of rows) {
    yield csvLine([
      id,
      batchId,
      moleculeId,
      maker,
      ...[createdAt, expiresAt, revokedAt].map(moment),
      downloads,
    ]);
  }
}

/** Structures as they are computed. */
export async function* moleculeLines(teamId: string): AsyncGenerator<string> {
  yield csvLine(['id', 'smiles', 'formula', 'atoms', 'format', 'structure', 'stored at']);
  const rows = stepwise((after) =>
    db
      .select({
        id: molecules.id,
        smiles: molecules.smiles,
        formula: molecules.formula,
        atomCount: molecules.atomCount,
        format: molecules.format,
        structure: molecules.structure,
        createdAt: molecules.createdAt,
      })
      .from(molecules)
      .where(and(eq(molecules.teamId, teamId), gt(molecules.id, after)))
      .orderBy(asc(molecules.id))
      .limit(STEP),
  );
  for await (const { id, smiles, formula, atomCount, format, structure, createdAt } of rows) {
    yield csvLine([id, smiles, formula, atomCount, format, structure, moment(createdAt)]);
  }
}
