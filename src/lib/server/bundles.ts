/** Bundles: everything that was computed for a molecule or a batch, streamed as a zip that others can recompute from. */
import type { ZipArchive } from 'archiver';
import { and, asc, eq, gt, inArray, isNotNull } from 'drizzle-orm';
import { bundleSchemaText } from '../domain/bundle-schema';
import { createNamer } from '../domain/file-names';
import { COMPUTE_AGAIN, methodsText } from '../domain/methods';
import { ENGINE_VERSION } from '../engine';
import { readAnswers, resultIdsOf, type Answer } from './answers';
import { openArchive, type ArchiveWriter } from './archive-writer';
import * as batches from './batches';
import { filesOf } from './bundle-files';
import { db } from './db';
import { entries, molecules } from './db/schema';
import { recordEvent } from './events';
import { require, type InTeam, type Member } from './member';
import { get as getMolecule, nameOf, readStored } from './molecules';

/** A row to be bundled: a molecule under the name it was sent with. */
interface BundledRow {
  readonly name: string;
  readonly molecule: typeof molecules.$inferSelect;
}

export interface Bundle {
  readonly fileName: string;
  readonly archive: ZipArchive;
}

/** The bundle of one molecule, with all answers the team has for it. */
export async function bundleMolecule(member: Member, moleculeId: string): Promise<Bundle> {
  require(member, 'download bundles');
  const bundle = await packMolecule(member, moleculeId);
  await recordEvent(db, member, 'download bundle', `molecule:${moleculeId}`);
  return bundle;
}

/** As `bundleMolecule`, for who may have it without being a member. */
export async function packMolecule(team: InTeam, moleculeId: string): Promise<Bundle> {
  const molecule = await getMolecule(team, moleculeId);
  const name = await nameOf(molecule);
  return open(team, name, rowsOf([{ name, molecule }]), null);
}

/** The bundle of a batch, or of the chosen rows of it, row by row. */
export async function bundleBatch(
  member: Member,
  batchId: string,
  chosen: readonly string[] = [],
): Promise<Bundle> {
  require(member, 'download bundles');
  const bundle = await packBatch(member, batchId, chosen);
  await recordEvent(db, member, 'download bundle', `batch:${batchId}`);
  return bundle;
}

/** As `bundleBatch`, for who may have it without being a member. */
export async function packBatch(
  team: InTeam,
  batchId: string,
  chosen: readonly string[] = [],
): Promise<Bundle> {
  const batch = await batches.get(team, batchId);
  return open(team, batch.name, batchRows(batch.id, chosen), batch.id);
}

async function* rowsOf(rows: readonly BundledRow[]): AsyncGenerator<BundledRow> {
  yield* rows;
}

/** The rows of a batch in their order, a hundred at a time, so that memory does not grow with the batch. */
async function* batchRows(batchId: string, chosen: readonly string[]): AsyncGenerator<BundledRow> {
  let after = 0;
  for (;;) {
    const rows = await db
      .select({
        position: entries.position,
        name: entries.name,
        molecule: molecules,
      })
      .from(entries)
      .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
      .where(
        and(
          eq(entries.batchId, batchId),
          isNotNull(entries.moleculeId),
          gt(entries.position, after),
          chosen.length > 0 ? inArray(entries.id, [...chosen]) : undefined,
        ),
      )
      .orderBy(asc(entries.position))
      .limit(100);
    if (rows.length === 0) return;
    after = rows[rows.length - 1].position;
    yield* rows;
  }
}

function open(
  team: InTeam,
  name: string,
  rows: AsyncGenerator<BundledRow>,
  batchId: string | null,
): Bundle {
  const nameFor = createNamer();
  const archive = openArchive((writer) => fill(writer, team, name, rows, batchId));
  return { fileName: `${nameFor(name)}.zip`, archive };
}

/** What the manifest says of one answer. */
export interface ManifestAnswer {
  readonly name: string;
  readonly smiles: string;
  readonly kind: string;
  readonly model: string;
  readonly engineVersion: string;
  readonly settings: unknown;
}

/** Writes the rows' files, and the manifest last. */
async function fill(
  writer: ArchiveWriter,
  team: InTeam,
  name: string,
  rows: AsyncGenerator<BundledRow>,
  batchId: string | null,
): Promise<void> {
  const answers = await addRows(writer, team, rows, batchId);
  await addReadingHelp(writer, answers);
  const manifest = { name, madeBy: `Windlass ${ENGINE_VERSION}`, answers, sha256: writer.sums };
  await writer.add({ path: 'manifest.json', content: `${JSON.stringify(manifest, null, 2)}\n` });
}

/** Writes the files of every row that has an answer, below a folder; returns what the manifest says of them. */
async function addRows(
  writer: ArchiveWriter,
  team: InTeam,
  rows: AsyncGenerator<BundledRow>,
  batchId: string | null,
  below = '',
): Promise<ManifestAnswer[]> {
  const answers: ManifestAnswer[] = [];
  const requests: string[] = [];
  const nameFor = createNamer();
  for await (const row of rows) {
    const found = await answersOf(team, row, batchId);
    if (found.length === 0) continue;
    const bundled = {
      name: row.name,
      folder: `${below}${nameFor(row.name)}`,
      smiles: row.molecule.smiles,
      molecule: readStored(row.molecule),
      answers: found,
    };
    for (const file of filesOf(bundled)) await writer.add(file);
    answers.push(
      ...found.map(({ kind, model, engineVersion, settings }) => ({
        name: row.name,
        smiles: row.molecule.smiles,
        kind,
        model,
        engineVersion,
        settings,
      })),
    );
    requests.push(...found.map((answer) => requestLine(row.molecule, answer)));
  }
  await writer.add({ path: `${below}requests.jsonl`, content: requests.join('') });
  return answers;
}

/** Writes the answers of one batch below a folder of a larger archive. */
export function addBatch(
  writer: ArchiveWriter,
  team: InTeam,
  batchId: string,
  below: string,
): Promise<ManifestAnswer[]> {
  return addRows(writer, team, batchRows(batchId, []), batchId, below);
}

/** Writes how the answers were computed, and the schema of their JSON. */
export async function addReadingHelp(
  { add }: ArchiveWriter,
  answers: readonly Pick<ManifestAnswer, 'engineVersion' | 'model' | 'kind'>[],
): Promise<void> {
  const unique = (values: readonly string[]): string[] => [...new Set(values)].sort();
  await add({
    path: 'methods.md',
    content: `${methodsText({
      engineVersion:
        unique(answers.map((answer) => answer.engineVersion)).join(', ') || ENGINE_VERSION,
      models: unique(answers.map((answer) => answer.model)),
      kinds: unique(answers.map((answer) => answer.kind)),
    })}\n${COMPUTE_AGAIN}`,
  });
  await add({ path: 'answer.schema.json', content: bundleSchemaText() });
}

/** What the command line is asked to compute an answer again: the very structure and settings it rests on. */
function requestLine(
  { format, structure }: BundledRow['molecule'],
  { kind, settings }: Answer,
): string {
  return `${JSON.stringify({ molecule: { [format]: structure }, task: { kind, ...settings } })}\n`;
}

async function answersOf(
  team: InTeam,
  { molecule }: BundledRow,
  batchId: string | null,
): Promise<Answer[]> {
  return readAnswers(await resultIdsOf(team, molecule.id, batchId), molecule.atomCount);
}
