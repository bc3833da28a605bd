/** The search over the molecules of a large team: the median time of an answer, for each kind of question. */
import { createHash, randomBytes, randomUUID } from 'node:crypto';
import { fileURLToPath } from 'node:url';
import { readSearch } from '$lib/domain/search';
import { fingerprintOf, molecularFormula, readMolecule } from '$lib/engine';
import type { Member } from '$lib/server/member';
import { startTestCluster } from '../../scripts/test-cluster.mjs';
import { migrateDatabase } from '../../src/lib/server/db/migrate';
import { librarySmiles } from '../support/library';
import { markdownTable } from './report';

const MOLECULES = 20_000;
const CHUNK = 1_000;
const PASSES = 15;
const PAGE = 30;

const questions: Record<string, Record<string, string>> = {
  'everything, first page': {},
  'everything, last page': { page: String(Math.ceil(MOLECULES / PAGE)) },
  'name, one hit': { text: 'compound 19876', in: 'name' },
  'name, thousands of hits': { text: 'compound 1', in: 'name' },
  'name, two letters': { text: 'co', in: 'name' },
  'names and SMILES': { text: 'c1ccccc1' },
  'whole SMILES': { text: 'Cc1ccc(C)cc1', in: 'exact' },
  'part of SMILES': { text: 'CCCCCC(F)(F)F', in: 'part' },
  'state, few': { state: 'failed' },
  'state, most': { state: 'done' },
  'kind, none': { kind: 'strain' },
  'structure, common': { structure: 'c1ccccc1' },
  'structure, in all': { structure: 'C' },
  'structure, rare': { structure: 'CC#CC(F)(F)F' },
  'structure, in none': { structure: '[Si]' },
  'structure, badly screened': { structure: '*~*(~*)(~*)~*(~*)(~*)~*' },
  'structure and name': { structure: 'c1ccsc1', text: '77' },
};

/** Puts the library into a team of its own, with names, fingerprints and tasks. */
async function fill(): Promise<Member> {
  const { db } = await import('$lib/server/db');
  const { batches, entries, molecules, tasks, teams } = await import('$lib/server/db/schema');
  const [{ id: teamId }] = await db.insert(teams).values({ name: 'Bench' }).returning();
  const [{ id: batchId }] = await db
    .insert(batches)
    .values({ teamId, name: 'Library', source: 'upload', plan: {}, submittedAt: new Date() })
    .returning();
  const library = librarySmiles(MOLECULES);
  for (let from = 0; from < library.length; from += CHUNK) {
    const read = library.slice(from, from + CHUNK).flatMap((text) => {
      try {
        const molecule = readMolecule({ smiles: text });
        return [{ smiles: molecule.smiles, formula: molecularFormula(molecule) }];
      } catch {
        return [];
      }
    });
    const stored = await db
      .insert(molecules)
      .values(
        read.map(({ smiles, formula }) => ({
          teamId,
          digest: createHash('sha256').update(`${smiles} ${randomUUID()}`).digest('hex'),
          smiles,
          formula,
          atomCount: 20,
          rotors: [],
          format: 'smiles' as const,
          structure: smiles,
          hasGeometry: false,
          fingerprint: fingerprintOf(smiles),
        })),
      )
      .returning({ id: molecules.id });
    const rows = await db
      .insert(entries)
      .values(
        stored.map(({ id }, n) => ({
          batchId,
          position: from + n + 1,
          name: `compound ${from + n}`,
          moleculeId: id,
          verdict: 'ready' as const,
        })),
      )
      .returning({ id: entries.id });
    await db.insert(tasks).values(
      rows.flatMap(({ id }, n) =>
        (['conformers', 'conjugation'] as const).map((kind) => ({
          batchId,
          entryId: id,
          kind,
          settings: {},
          ...(n % 500 === 0
            ? { state: 'failed' as const, error: { code: 'none', message: 'none' } }
            : { state: 'done' as const }),
        })),
      ),
    );
  }
  const { sql } = await import('drizzle-orm');
  await db.execute(sql`vacuum analyze`);
  return { userId: randomUUID(), teamId, role: 'reader' };
}

async function measure(member: Member): Promise<string[][]> {
  const { search } = await import('$lib/server/search');
  const rows: string[][] = [];
  for (const [name, query] of Object.entries(questions)) {
    const times: number[] = [];
    let last: Awaited<ReturnType<typeof search>> | undefined;
    for (let pass = 0; pass <= PASSES; pass++) {
      const begin = performance.now();
      last = await search(member, readSearch(new URLSearchParams(query)), PAGE);
      if (pass > 0) times.push(performance.now() - begin);
    }
    times.sort((a, b) => a - b);
    const { rows: found, total, candidates, compared, next } = last!;
    rows.push([
      name,
      times[PASSES >> 1].toFixed(0),
      times[PASSES - 1].toFixed(0),
      total === null ? `${found.length}${next ? ' and more' : ''}` : String(total),
      total === null ? `${compared} of ${candidates}` : '',
    ]);
  }
  return rows;
}

/** The section's report in Markdown; takes minutes, most of them to fill the database. */
export async function searchPageSection(): Promise<string> {
  const cluster = await startTestCluster();
  Object.assign(process.env, {
    DATABASE_URL: cluster.url,
    AUTH_SECRET: randomBytes(32).toString('hex'),
    WINDLASS_LOG_LEVEL: 'silent',
  });
  try {
    await migrateDatabase(cluster.url, fileURLToPath(new URL('../../drizzle', import.meta.url)));
    const rows = await measure(await fill());
    const { closeDatabase } = await import('$lib/server/db');
    await closeDatabase();
    const head = ['question', 'median, ms', 'slowest, ms', 'found', 'compared of candidates'];
    return `## Search over ${MOLECULES} molecules, elapsed time of one page\n\n${markdownTable(head, rows)}`;
  } finally {
    cluster.remove();
  }
}
