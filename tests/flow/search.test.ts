/** Searches over the molecules of a team, with real indexes and fingerprints. */
import { randomUUID } from 'node:crypto';
import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readSearch } from '$lib/domain/search';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { readPattern } from '$lib/engine';
import { db } from '$lib/server/db';
import { batches, entries, molecules, tasks } from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import { fillFingerprints } from '$lib/server/fingerprints';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { search, SearchFault, type SearchAnswer } from '$lib/server/search';
import { submit } from '$lib/server/submission';
import { librarySmiles } from '../support/library';
import { newTeam } from '../support/people';

afterAll(stopQueue);

const PAGE = 30;
const patient = { now: () => 0, budget: 1 };

async function* bytesOf(text: string) {
  yield new TextEncoder().encode(text);
}

async function upload(member: Member, name: string, text: string): Promise<string> {
  const options = {
    name,
    source: 'paste',
    format: 'smi',
    reading: readingSchema.parse({}),
  } as const;
  return readUpload(member, options, bytesOf(text), () => undefined);
}

async function send(member: Member, name: string, text: string): Promise<string> {
  const id = await upload(member, name, text);
  await submit(member, id, planSchema.parse({ conformers: {} }));
  return id;
}

const ask = (member: Member, query: Record<string, string>, clock = patient) =>
  search(member, readSearch(new URLSearchParams(query)), PAGE, clock);

/** Every page of a search for a structure. */
async function askAll(member: Member, query: Record<string, string>, clock = patient) {
  const rows: SearchAnswer['rows'][number][] = [];
  let pages = 0;
  for (let after: string | null = ''; after !== null; pages++) {
    const answer: SearchAnswer = await ask(member, { ...query, after }, clock);
    rows.push(...answer.rows);
    after = answer.next;
  }
  return { rows, pages };
}

const names = ({ rows }: Pick<SearchAnswer, 'rows'>) => rows.map(({ name }) => name).sort();

let team: Awaited<ReturnType<typeof newTeam>>;
let stranger: Member;
let libraryBatch: string;
const library = librarySmiles(640).filter((_, n) => n % 3 === 0);

beforeAll(async () => {
  team = await newTeam();
  stranger = (await newTeam()).lead;
  libraryBatch = await send(
    team.modeler,
    'Library',
    library.map((smiles, n) => `${smiles} L${n}`).join('\n'),
  );
  await send(
    team.chemist,
    'Drugs',
    ['CC(=O)Nc1ccc(O)cc1 Paracetamol 100%', 'C=CC(=C)C isoprene_a', 'C=CC=C isopreneXa'].join('\n'),
  );
  await send(stranger, 'Secret', 'CC(=O)Nc1ccc(O)cc1 hidden paracetamol\nClCCBr hidden halide');
}, 120_000);

describe('a search by text', () => {
  it('finds parts of names whatever their case', async () => {
    expect(names(await ask(team.reader, { text: 'PARACET' }))).toEqual(['Paracetamol 100%']);
    expect(names(await ask(team.reader, { text: 'isoprene', in: 'name' }))).toHaveLength(2);
  });

  it('takes the signs of patterns as themselves', async () => {
    expect(names(await ask(team.reader, { text: '100%', in: 'name' }))).toHaveLength(1);
    expect(names(await ask(team.reader, { text: 'e_a' }))).toEqual(['isoprene_a']);
    expect(names(await ask(team.reader, { text: '%' }))).toEqual(['Paracetamol 100%']);
    expect(names(await ask(team.reader, { text: '\\' }))).toEqual([]);
  });

  it('finds a whole molecule however it is spelled', async () => {
    const spelled = { text: 'Oc1ccc(cc1)NC(C)=O', in: 'exact' };
    expect(names(await ask(team.reader, spelled))).toEqual(['Paracetamol 100%']);
    expect(names(await ask(team.reader, { text: 'C(=C)C(C)=C' }))).toEqual(['isoprene_a']);
  });

  it('finds a part of the canonical SMILES as text, in its own case', async () => {
    const { rows } = await ask(team.reader, { text: 'C=CC', in: 'part' });
    expect(rows.length).toBeGreaterThan(0);
    for (const { smiles } of rows) expect(smiles).toContain('C=CC');
    expect((await ask(team.reader, { text: 'c=cc', in: 'part' })).rows).toEqual([]);
  });

  it('says when a SMILES cannot be read', async () => {
    await expect(ask(team.reader, { text: 'C1CC', in: 'exact' })).rejects.toThrow(SearchFault);
  });

  it('says when a text is too long', async () => {
    await expect(ask(team.reader, { text: 'C'.repeat(4000) })).rejects.toThrow(SearchFault);
  });

  it('has pages that together hold everything once', async () => {
    const first = await ask(team.reader, {});
    expect(first.rows).toHaveLength(PAGE);
    const seen = new Set<string>();
    for (let page = 1; page <= Math.ceil(first.total! / PAGE); page++) {
      const { rows } = await ask(team.reader, { page: String(page) });
      for (const { id } of rows) seen.add(id);
    }
    expect(seen.size).toBe(first.total);
    expect(seen.size).toBe(await db.$count(molecules, eq(molecules.teamId, team.reader.teamId)));
  });
});

describe('a search by state, kind and batch', () => {
  it('finds molecules by the state of their tasks', async () => {
    const found = await ask(team.reader, { text: 'isoprene_a' });
    const [{ id }] = found.rows;
    expect(found.rows[0]).toMatchObject({ queued: 1, failed: 0, batchName: 'Drugs', profiles: 0 });
    const own = sql`${tasks.entryId} in (select id from entries where molecule_id = ${id})`;
    await db.update(tasks).set({ state: 'cancelled' }).where(own);
    expect(names(await ask(team.reader, { state: 'cancelled' }))).toEqual(['isoprene_a']);
    expect((await ask(team.reader, { state: 'failed' })).total).toBe(0);
    expect((await ask(team.reader, { kind: 'scan' })).total).toBe(0);
  });

  it('finds the molecules of one batch', async () => {
    const { total } = await ask(team.reader, { batch: libraryBatch });
    const own = await db
      .selectDistinct({ id: entries.moleculeId })
      .from(entries)
      .where(and(eq(entries.batchId, libraryBatch), isNotNull(entries.moleculeId)));
    expect(total).toBe(own.length);
    expect((await ask(team.reader, { batch: randomUUID() })).total).toBe(0);
  });
});

describe('a search for a structure', () => {
  const patterns = [
    'c1ccccc1',
    'C(F)(F)F',
    'C=CC=C',
    'NC(=O)',
    '[#7;R]',
    'C1CC1',
    'c1ccsc1',
    '[!#6;!#8]C',
    'Cl',
    'C#C',
    'C~C~C~O',
    'OC(=O)C',
    'c1ccc2ccccc2c1',
    'C~C(~C)~C',
  ];
  const bruteForce = async (member: Member, smarts: string) => {
    const pattern = readPattern(smarts);
    const all = await db.select().from(molecules).where(eq(molecules.teamId, member.teamId));
    return all
      .filter(({ smiles }) => pattern.isIn(smiles))
      .map(({ id }) => id)
      .sort();
  };
  const ids = ({ rows }: Pick<SearchAnswer, 'rows'>) => rows.map(({ id }) => id).sort();

  it('finds the same with fingerprints, without them, and by comparing everything', async () => {
    const expected = new Map<string, string[]>();
    for (const smarts of patterns) {
      expected.set(smarts, await bruteForce(team.reader, smarts));
      expect(ids(await askAll(team.reader, { structure: smarts })), smarts).toEqual(
        expected.get(smarts),
      );
    }
    while ((await fillFingerprints(100)) > 0);
    expect(await db.$count(molecules, isNull(molecules.fingerprint))).toBe(0);
    const total = await db.$count(molecules, eq(molecules.teamId, team.reader.teamId));
    let screened = 0;
    for (const smarts of patterns) {
      const hits = expected.get(smarts)!;
      expect(ids(await askAll(team.reader, { structure: smarts })), smarts).toEqual(hits);
      expect(hits.length, smarts).toBeGreaterThan(0);
      const { candidates } = await ask(team.reader, { structure: smarts });
      expect(candidates).toBeGreaterThanOrEqual(hits.length);
      if (candidates < total) screened += 1;
    }
    expect(screened).toBeGreaterThanOrEqual(patterns.length - 2);
  }, 240_000);

  it('stops when its time is up, says so, and goes on from there', async () => {
    let moment = 0;
    const hurried = { now: () => (moment += 1), budget: 20 };
    const first = await ask(team.reader, { structure: 'C~C' }, hurried);
    expect(first.compared).toBeLessThan(first.candidates);
    expect(first.next).not.toBeNull();
    const { rows, pages } = await askAll(team.reader, { structure: 'C1CC1' }, hurried);
    expect(pages).toBeGreaterThan(1);
    expect(ids({ rows })).toEqual(await bruteForce(team.reader, 'C1CC1'));
  });

  it('is through when the last candidate was compared as time ran out', async () => {
    let moment = 0;
    const late = { now: () => (moment += 100), budget: 1 };
    const answer = await ask(team.reader, { structure: 'c1ccccc1', text: 'paracet' }, late);
    expect(answer).toMatchObject({ compared: 1, candidates: 1, next: null });
  });

  it('combines with the other conditions', async () => {
    const { rows } = await askAll(team.reader, { structure: 'c1ccccc1', text: 'paracet' });
    expect(names({ rows })).toEqual(['Paracetamol 100%']);
  });

  it('says what is wrong with a structure', async () => {
    for (const structure of ['C1CC', '((((', 'xyz', '[D3]', 'C'.repeat(200), 'C\u0000C']) {
      await expect(ask(team.reader, { structure }), structure).rejects.toThrow(SearchFault);
    }
  });
});

describe('another team', () => {
  it('finds only its own', async () => {
    expect(names(await ask(stranger, { text: 'paracetamol' }))).toEqual(['hidden paracetamol']);
    expect(names(await ask(stranger, { text: 'CC(=O)Nc1ccc(O)cc1' }))).toHaveLength(1);
    expect(names(await askAll(stranger, { structure: 'c1ccccc1' }))).toEqual([
      'hidden paracetamol',
    ]);
    expect((await ask(team.reader, { text: 'hidden' })).total).toBe(0);
    expect((await ask(stranger, { batch: libraryBatch })).total).toBe(0);
  });

  it('learns nothing from a foreign molecule as the place to go on from', async () => {
    const [own] = (await ask(team.reader, {})).rows;
    expect((await ask(stranger, { structure: 'C', after: own.id })).rows).toEqual([]);
  });
});

describe('what is not submitted', () => {
  it('is not found, not even by its maker’s team', async () => {
    await upload(team.chemist, 'A draft', 'FC(Cl)(Br)I rarity');
    expect((await ask(team.chemist, { text: 'rarity' })).total).toBe(0);
    const submitted = await db.$count(batches, sql`${batches.submittedAt} is not null`);
    expect(submitted).toBe(3);
  });
});

describe('hostile addresses', () => {
  it('are answered like any others', async () => {
    for (const query of [
      { text: "'; drop table molecules; --" },
      { text: '\u0000' },
      { page: '-1' },
      { page: '1e9' },
      { state: 'nothing' },
      { batch: "x' or 1=1" },
      { after: 'none', structure: 'C' },
    ]) {
      const { rows } = await ask(team.reader, query as unknown as Record<string, string>);
      expect(Array.isArray(rows), JSON.stringify(query)).toBe(true);
    }
  });
});
