/** The example on the front page: a turn that this very product computed for its demo team, or none. */
import { and, desc, eq } from 'drizzle-orm';
import { profileCurve, torsion, wrapDegrees } from '../engine/light';
import { readAnswers, type StoredProfile } from './answers';
import { db } from './db';
import { molecules, results } from './db/schema';
import { findDemoTeam } from './demo';
import { headlinesOf } from './headlines';
import { bondName, readStored } from './molecules';

/** Buta-1,3-diene, the smallest of the demo's dienes; its name in the demo. */
const EXAMPLE = { smiles: 'C=CC=C', name: 'buta-1,3-diene' };
/** Degrees between two points of the drawn curve. */
const FINENESS = 5;
/** Everybody sees the same example: it is read again this often, and sooner while the demo is still computed. */
const KEPT_MS = 600_000;
const RETRY_MS = 15_000;

/** What the front page shows of a turn. Energies kcal/mol above the lowest form, angles in degrees. */
export interface Example {
  readonly name: string;
  /** The answer as the molecule's own page has it. */
  readonly sentence: string;
  readonly bond: string;
  /** From 0° on, each a step further round. */
  readonly energies: readonly number[];
  readonly step: number;
  readonly points: readonly {
    readonly kind: 'minimum' | 'maximum';
    readonly angle: number;
    readonly relative: number;
    readonly label: string;
  }[];
  /** The form that is drawn along the bond, and where its atoms stand, clockwise from the first torsion atom. */
  readonly form: { readonly angle: number; readonly label: string };
  readonly front: readonly number[];
  readonly back: readonly number[];
}

let kept: { readonly example: Example | null; readonly until: number } | null = null;

/** The example, or null where there is no demo or nothing of it is computed yet. */
export async function frontPageExample(): Promise<Example | null> {
  if (!kept || kept.until < Date.now()) {
    const example = await readExample();
    kept = { example, until: Date.now() + (example ? KEPT_MS : RETRY_MS) };
  }
  return kept.example;
}

async function readExample(): Promise<Example | null> {
  const teamId = await findDemoTeam(db);
  if (teamId === null) return null;
  const [stored] = await db
    .select({ molecule: molecules, scanId: results.id })
    .from(molecules)
    .innerJoin(results, and(eq(results.moleculeId, molecules.id), eq(results.kind, 'scan')))
    .where(and(eq(molecules.teamId, teamId), eq(molecules.smiles, EXAMPLE.smiles)))
    .orderBy(desc(results.createdAt))
    .limit(1);
  if (!stored) return null;
  const sentence = (await headlinesOf({ teamId }, [stored.molecule.id])).get(stored.molecule.id);
  const [answer] = await readAnswers([stored.scanId], stored.molecule.atomCount);
  const [profile] = answer.profiles;
  if (sentence === undefined || !profile) return null;
  return describe(stored.molecule, profile, sentence);
}

function describe(
  stored: typeof molecules.$inferSelect,
  profile: StoredProfile,
  sentence: string,
): Example | null {
  const molecule = readStored(stored);
  const [i, j, k, l] = profile.torsion;
  // The second form says more than the lowest, in which the atoms behind are hidden by those in front.
  const minima = profile.stationary
    .filter(({ kind, angle }) => kind === 'minimum' && angle >= 0)
    .sort((a, b) => b.relative - a.relative);
  if (minima.length === 0) return null;
  const [form] = minima;
  const curve = profileCurve(profile);
  const zero = form.energy - form.relative;
  const others = (atom: number, without: number) =>
    molecule.neighbors[atom].map((neighbor) => neighbor.atom).filter((each) => each !== without);
  const at = (a: number, d: number) => torsion(form.coordinates, a, j, k, d);
  return {
    name: EXAMPLE.name,
    sentence,
    bond: bondName(molecule, [j, k]),
    energies: Array.from({ length: 360 / FINENESS }, (_, n) => curve.at(n * FINENESS) - zero),
    step: FINENESS,
    points: profile.stationary.map(({ kind, angle, relative, label }) => ({
      kind,
      angle,
      relative,
      label,
    })),
    form: { angle: form.angle, label: form.label },
    front: others(j, k).map((atom) => wrapDegrees(at(i, l) - at(atom, l))),
    back: others(k, j).map((atom) => at(i, atom)),
  };
}
