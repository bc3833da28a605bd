/** Bundles: everything that was computed for a molecule or a batch, streamed as a zip that others can recompute from. */
import { createHash } from 'node:crypto';
import { once } from 'node:events';
import { ZipArchive } from 'archiver';
import { and, asc, eq, gt, inArray, isNotNull } from 'drizzle-orm';
import { bundleSchemaText } from '../domain/bundle-schema';
import { createNamer } from '../domain/file-names';
import { COMPUTE_AGAIN, methodsText } from '../domain/methods';
import { ENGINE_VERSION } from '../engine';
import { readAnswers, resultIdsOf, type Answer } from './answers';
import * as batches from './batches';
import { filesOf } from './bundle-files';
import type { BundleFile } from './bundle-parts';
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
  const archive = new ZipArchive({ zlib: { level: 6 } });
  const nameFor = createNamer();
  fill(archive, team, name, rows, batchId).catch((error: unknown) =>
    archive.destroy(error instanceof Error ? error : new Error(String(error))),
  );
  return { fileName: `${nameFor(name)}.zip`, archive };
}

/** What the manifest says of one answer. */
interface ManifestAnswer {
  readonly name: string;
  readonly smiles: string;
  readonly kind: string;
  readonly model: string;
  readonly engineVersion: string;
  readonly settings: unknown;
}

/** Writes file after file, each only when the one before it has gone out, and the manifest last. */
async function fill(
  archive: ZipArchive,
  team: InTeam,
  name: string,
  rows: AsyncGenerator<BundledRow>,
  batchId: string | null,
): Promise<void> {
  const sums: Record<string, string> = {};
  const answers: ManifestAnswer[] = [];
  const requests: string[] = [];
  const nameFor = createNamer();
  const add = async ({ path, content }: BundleFile): Promise<void> => {
    const bytes = Buffer.from(content, 'utf8');
    sums[path] = createHash('sha256').update(bytes).digest('hex');
    const written = once(archive, 'entry');
    archive.append(bytes, { name: path });
    await written;
  };
  for await (const row of rows) {
    const found = await answersOf(team, row, batchId);
    if (found.length === 0) continue;
    const bundled = {
      name: row.name,
      folder: nameFor(row.name),
      smiles: row.molecule.smiles,
      molecule: readStored(row.molecule),
      answers: found,
    };
    for (const file of filesOf(bundled)) await add(file);
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
  await add({ path: 'requests.jsonl', content: requests.join('') });
  await add({ path: 'answer.schema.json', content: bundleSchemaText() });
  const manifest = { name, madeBy: `Windlass ${ENGINE_VERSION}`, answers, sha256: sums };
  archive.append(`${JSON.stringify(manifest, null, 2)}\n`, { name: 'manifest.json' });
  await archive.finalize();
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
