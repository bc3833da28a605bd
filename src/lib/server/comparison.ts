/** Stored torsion profiles of a team, as a comparison lays them side by side. */
import { and, asc, desc, eq, inArray, sql } from 'drizzle-orm';
import type { ComparedProfile } from '../domain/comparison';
import { ELEMENT_SYMBOLS } from '../engine/molecule/elements';
import { atomLabel, type Molecule, type Result } from '../engine';
import { db } from './db';
import { molecules, profileCurves, profiles, results } from './db/schema';
import { notFound, type Member } from './member';
import { readStored } from './molecules';

/** The name a molecule has in the newest batch of its team that holds it; its formula while it is in none. */
const moleculeName = sql<string>`coalesce((select e.name from entries e join batches b on b.id = e.batch_id
  where e.molecule_id = ${molecules.id} and b.submitted_at is not null
  order by b.submitted_at desc, e.position limit 1), ${molecules.formula})`;

/**
 * The profiles with these ids that belong to the member's team, in that order; throws 404 where there is none of them,
 * so that an old link still shows what is left.
 */
export async function loadProfiles(
  member: Member,
  ids: readonly string[],
): Promise<ComparedProfile[]> {
  if (ids.length === 0) return [];
  const rows = await db
    .select({
      profile: profiles,
      curve: profileCurves,
      details: results.details,
      molecule: molecules,
      name: moleculeName,
    })
    .from(profiles)
    .innerJoin(results, eq(results.id, profiles.resultId))
    .innerJoin(molecules, eq(molecules.id, results.moleculeId))
    .innerJoin(
      profileCurves,
      and(eq(profileCurves.profileId, profiles.id), eq(profileCurves.model, results.model)),
    )
    .where(and(inArray(profiles.id, [...ids]), eq(results.teamId, member.teamId)))
    .orderBy(desc(profileCurves.relaxed));
  if (rows.length === 0) notFound('profile');
  return ids.flatMap((id) => {
    const row = rows.find(({ profile }) => profile.id === id);
    return row ? [toCompared(row)] : [];
  });
}

function toCompared({
  profile,
  curve,
  details,
  molecule: stored,
  name,
}: {
  profile: typeof profiles.$inferSelect;
  curve: typeof profileCurves.$inferSelect;
  details: unknown;
  molecule: typeof molecules.$inferSelect;
  name: string;
}): ComparedProfile {
  const molecule = readStored(stored);
  const [i, j, k, l] = profile.torsion;
  const conjugated = stored.rotors.some(
    ({ torsion, conjugated }) =>
      conjugated && torsion.slice(1, 3).includes(j) && torsion.slice(1, 3).includes(k),
  );
  const { symmetry, complete } = details as Pick<Result<'scan'>, 'symmetry' | 'complete'>;
  const stationary = curve.stationary as (ComparedProfile['stationary'][number] & {
    energy: number;
  })[];
  const lowest = Math.min(...curve.energies, ...stationary.map(({ energy }) => energy));
  return {
    id: profile.id,
    moleculeId: stored.id,
    molecule: name,
    bond: label(molecule, [j, k], '–'),
    bondKind: `${elements(molecule, [j, k]).sort().join('–')}${conjugated ? ', conjugated' : ''}`,
    zero: label(molecule, [i, l], ' and '),
    zeroElements: elements(molecule, [i, l]).join(' '),
    model: curve.model,
    relaxed: curve.relaxed,
    complete,
    points: profile.angles.map((angle, n) => ({ angle, relative: curve.energies[n] - lowest })),
    stationary: stationary.map(({ kind, angle, label: form, energy }) => ({
      kind,
      angle,
      label: form,
      relative: energy - lowest,
    })),
    mirror: symmetry.mirror,
  };
}

function label({ atomicNumbers }: Molecule, atoms: readonly number[], between: string): string {
  return atoms.map((atom) => atomLabel(atomicNumbers[atom], atom)).join(between);
}

function elements({ atomicNumbers }: Molecule, atoms: readonly number[]): string[] {
  return atoms.map((atom) => ELEMENT_SYMBOLS[atomicNumbers[atom]]);
}

/** A profile that can be added to a comparison. */
export interface ProfileChoice {
  readonly id: string;
  readonly bond: string;
  readonly model: string;
  readonly relaxed: boolean;
}

/** The profiles of each of these molecules of the member's team, by molecule; of the newest results first. */
export async function listProfiles(
  member: Member,
  moleculeIds: readonly string[],
): Promise<{ id: string; name: string; profiles: ProfileChoice[] }[]> {
  if (moleculeIds.length === 0) return [];
  const rows = await db
    .select({
      molecule: molecules,
      name: moleculeName,
      id: profiles.id,
      torsion: profiles.torsion,
      model: results.model,
      relaxed: sql<boolean>`(select bool_or(c.relaxed) from profile_curves c where c.profile_id = ${profiles.id})`,
    })
    .from(profiles)
    .innerJoin(results, eq(results.id, profiles.resultId))
    .innerJoin(molecules, eq(molecules.id, results.moleculeId))
    .where(and(eq(molecules.teamId, member.teamId), inArray(molecules.id, [...moleculeIds])))
    .orderBy(asc(profiles.torsion), desc(results.createdAt));
  return moleculeIds.flatMap((moleculeId) => {
    const own = rows.filter(({ molecule }) => molecule.id === moleculeId);
    if (own.length === 0) return [];
    const molecule = readStored(own[0].molecule);
    return {
      id: moleculeId,
      name: own[0].name,
      profiles: own.map(({ id, torsion, model, relaxed }) => ({
        id,
        bond: label(molecule, torsion.slice(1, 3), '–'),
        model,
        relaxed,
      })),
    };
  });
}
