/** The first answer of a molecule in one sentence, for lists and for the front page. */
import { and, count, desc, eq, inArray, sql } from 'drizzle-orm';
import type { Result } from '../engine';
import {
  byModel,
  conformersSentence,
  conjugationSentence,
  scanSentence,
  strainSentence,
} from '../domain/sentences';
import { readProfile } from '../domain/profile-reading';
import { db } from './db';
import { conformers, profileCurves, profiles, results } from './db/schema';
import { aboveLowest, type StationaryPointWithoutGeometry } from './answers';
import type { Member } from './member';

/** Which kind of answer a person wants to read first. */
const byWeight = sql`array_position(array['conjugation', 'strain', 'scan', 'conformers'], ${results.kind}::text)`;
const UNIT = 'kcal/mol';

const headColumns = {
  id: results.id,
  kind: results.kind,
  details: results.details,
  settings: results.settings,
  moleculeId: results.moleculeId,
  model: results.model,
  molfile: results.molfile,
};

/** What a headline is made from. */
async function readHeads(member: Pick<Member, 'teamId'>, moleculeIds: readonly string[]) {
  return db
    .selectDistinctOn([results.moleculeId], headColumns)
    .from(results)
    .where(
      and(
        eq(results.teamId, member.teamId),
        inArray(results.moleculeId, [...moleculeIds]),
        inArray(results.kind, ['conjugation', 'strain', 'scan', 'conformers']),
      ),
    )
    .orderBy(results.moleculeId, byWeight, desc(results.createdAt));
}
type Head = Awaited<ReturnType<typeof readHeads>>[number];

/**
 * A bond or torsion by its atoms as people read them: "C2–C3". Read off the answer's own molfile (V2000), since a list
 * has no time to read molecules.
 */
function bondName({ molfile }: Head, atoms: readonly number[]): string {
  const lines = molfile.split('\n');
  return atoms.map((atom) => `${lines[4 + atom].slice(31, 34).trim()}${atom + 1}`).join('–');
}

/** The first answer of each molecule that has one, by the molecule's id. Energies are in kcal/mol. */
export async function headlinesOf(
  member: Pick<Member, 'teamId'>,
  moleculeIds: readonly string[],
): Promise<Map<string, string>> {
  if (moleculeIds.length === 0) return new Map();
  const heads = await readHeads(member, moleculeIds);
  const sentences = await Promise.all(
    heads.map(async (head) => [head.moleculeId, await sentenceOf(head)] as const),
  );
  return new Map(sentences.flatMap(([id, text]) => (text === null ? [] : [[id, text] as const])));
}

function sentenceOf(head: Head): string | null | Promise<string | null> {
  switch (head.kind) {
    case 'conjugation':
      return conjugationHeadline(head);
    case 'strain':
      return strainHeadline(head);
    case 'scan':
      return scanHeadline(head);
    case 'conformers':
      return conformersHeadline(head);
    case 'map':
    case 'opinion':
    case 'ranking':
    case 'heat':
      return null;
  }
}

/** The bond with most to say: one that turns between s-cis and s-trans, if there is one. */
function conjugationHeadline(head: Head): string | null {
  const { bonds } = head.details as Pick<Result<'conjugation'>, 'bonds'>;
  const bond = bonds.find(({ difference }) => difference !== null) ?? bonds[0];
  if (!bond) return null;
  const { temperature } = head.settings as { temperature: number };
  return conjugationSentence(
    { ...bond, bond: byModel(bondName(head, bond.bond), head.model), temperature },
    UNIT,
  );
}

function strainHeadline(head: Head): string {
  const { strain, complete, torsions } = head.details as Pick<
    Result<'strain'>,
    'strain' | 'complete' | 'torsions'
  >;
  const [worst] = torsions;
  return strainSentence(
    {
      model: head.model,
      strain,
      complete,
      worst: worst ? { bond: bondName(head, worst.bond), strain: worst.strain } : null,
    },
    UNIT,
  );
}

async function scanHeadline(head: Head): Promise<string | null> {
  const [curve] = await db
    .select({
      torsion: profiles.torsion,
      angles: profiles.angles,
      relaxed: profileCurves.relaxed,
      energies: profileCurves.energies,
      stationary: profileCurves.stationary,
    })
    .from(profiles)
    .innerJoin(
      profileCurves,
      and(eq(profileCurves.profileId, profiles.id), eq(profileCurves.model, head.model)),
    )
    .where(eq(profiles.resultId, head.id))
    .limit(1);
  if (!curve) return null;
  const { symmetry, temperature, complete } = head.details as Pick<
    Result<'scan'>,
    'symmetry' | 'temperature' | 'complete'
  >;
  const { points, stationary } = aboveLowest(
    curve.angles.map((angle, n) => ({ angle, energy: curve.energies[n] })),
    curve.stationary as StationaryPointWithoutGeometry[],
  );
  return scanSentence(
    {
      bond: byModel(bondName(head, curve.torsion.slice(1, 3)), head.model),
      reading: readProfile({ points, stationary, symmetry }, temperature),
      relaxed: curve.relaxed,
      complete,
      converged: stationary.every(({ converged }) => converged),
    },
    UNIT,
  );
}

async function conformersHeadline(head: Head): Promise<string | null> {
  const [{ found, lowestPopulation }] = await db
    .select({
      found: count(),
      lowestPopulation: sql<number>`max(${conformers.population}) filter (where ${conformers.rank} = 0)`,
    })
    .from(conformers)
    .where(eq(conformers.resultId, head.id));
  if (found === 0) return null;
  const { complete } = head.details as { complete: boolean };
  const { window, temperature } = head.settings as { window: number; temperature: number };
  return conformersSentence(
    { model: head.model, count: found, window, lowestPopulation, temperature, complete },
    UNIT,
  );
}
