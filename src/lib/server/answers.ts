/** Stored answers, read back whole: for pages and bundles. */
import { aliasedTable, and, asc, desc, eq, inArray, isNotNull, isNull, or, sql } from 'drizzle-orm';
import { GFN2 } from '../domain/second-opinions';
import { db } from './db';
import {
  batches,
  conformers,
  entries,
  maps,
  profileCurves,
  profiles,
  results,
  tasks,
} from './db/schema';
import type { VibrationalAnalysis } from '../engine/light';
import type { InTeam } from './member';
import { unpack } from './packing';
import { toMap, type StoredMap } from './stored-maps';

export interface StoredConformer {
  readonly rank: number;
  readonly energy: number;
  readonly relative: number;
  readonly degeneracy: number;
  readonly population: number;
  readonly rmsdToLowest: number;
  /** Null in results of versions before 0.3. */
  readonly vibrations: VibrationalAnalysis | null;
  readonly coordinates: Float64Array;
}

export interface StoredPoint {
  readonly angle: number;
  readonly energy: number;
  readonly relative: number;
  readonly reached: number;
  readonly coordinates: Float64Array;
}

/** A stationary point as the engine describes it, with its geometry. */
export interface StoredStationaryPoint {
  readonly kind: 'minimum' | 'maximum';
  readonly angle: number;
  readonly energy: number;
  readonly relative: number;
  readonly label: string;
  readonly range: string;
  readonly converged: boolean;
  /** Missing in rigid scans and in results of versions before 0.3. */
  readonly vibrations?: VibrationalAnalysis;
  readonly coordinates: Float64Array;
}

export interface StoredProfile {
  readonly id: string;
  readonly torsion: readonly number[];
  readonly model: string;
  readonly relaxed: boolean;
  readonly points: readonly StoredPoint[];
  readonly stationary: readonly StoredStationaryPoint[];
}

/** One answer with all that hangs on it. */
export interface Answer {
  readonly id: string;
  readonly kind: (typeof results.$inferSelect)['kind'];
  readonly settings: Readonly<Record<string, unknown>>;
  readonly engineVersion: string;
  readonly createdAt: Date;
  readonly model: string;
  readonly molfile: string;
  readonly details: Readonly<Record<string, unknown>>;
  readonly warnings: readonly { readonly code: string; readonly message: string }[];
  readonly seconds: number;
  readonly conformers: readonly StoredConformer[];
  readonly profiles: readonly StoredProfile[];
  /** The energy over two torsions; null in answers of other kinds. */
  readonly map: StoredMap | null;
}

/** The results of a molecule's finished tasks in the member's team, those of one batch where it is named. */
export async function resultIdsOf(
  member: InTeam,
  moleculeId: string,
  batchId: string | null = null,
): Promise<string[]> {
  const rows = await db
    .selectDistinctOn([tasks.resultId], { id: tasks.resultId })
    .from(tasks)
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(
      and(
        eq(batches.teamId, member.teamId),
        eq(entries.moleculeId, moleculeId),
        batchId === null ? undefined : eq(batches.id, batchId),
        isNotNull(tasks.resultId),
      ),
    );
  return rows.flatMap(({ id }) => id ?? []);
}

/** What results are, without their numbers, the newest first. */
export function summarize(ids: readonly string[]) {
  const { id, kind, model, engineVersion } = results;
  return db
    .select({ id, kind, model, engineVersion })
    .from(results)
    .where(inArray(results.id, [...ids]))
    .orderBy(desc(results.createdAt), asc(results.id));
}

/** Reads answers by their ids, in the order of their kinds and the newest first. */
export async function readAnswers(ids: readonly string[], atomCount: number): Promise<Answer[]> {
  if (ids.length === 0) return [];
  const wanted = [...ids];
  const rows = await db
    .select()
    .from(results)
    .where(inArray(results.id, wanted))
    .orderBy(asc(results.kind), desc(results.createdAt), asc(results.id));
  const found = await db
    .select()
    .from(conformers)
    .where(inArray(conformers.resultId, wanted))
    .orderBy(asc(conformers.rank));
  const curves = await db
    .select()
    .from(profiles)
    .innerJoin(profileCurves, eq(profileCurves.profileId, profiles.id))
    .where(and(inArray(profiles.resultId, wanted), isNull(profileCurves.opinionId)));
  const asked = await opinionCurves(wanted);
  const mapped = await db.select().from(maps).where(inArray(maps.resultId, wanted));
  return rows.map((row) => ({
    id: row.id,
    kind: row.kind,
    settings: row.settings as Answer['settings'],
    engineVersion: row.engineVersion,
    createdAt: row.createdAt,
    model: row.model,
    molfile: row.molfile,
    details: row.details as Answer['details'],
    warnings: row.warnings as Answer['warnings'],
    seconds: row.seconds,
    conformers: found
      .filter(({ resultId }) => resultId === row.id)
      .map(({ resultId: _resultId, coordinates, ...conformer }) => ({
        ...conformer,
        vibrations: conformer.vibrations as VibrationalAnalysis | null,
        coordinates: unpack(coordinates, atomCount)[0],
      })),
    profiles: curves
      .filter(({ profiles: { resultId } }) => resultId === row.id)
      .concat(asked.filter(({ opinionId }) => opinionId === row.id))
      .map(({ profiles: profile, profile_curves: curve }) => toProfile(profile, curve, atomCount)),
    map: toMap(
      mapped.find(({ resultId }) => resultId === row.id),
      atomCount,
    ),
  }));
}

/** The curves of second opinions, each opinion's scan before those of the other models. */
async function opinionCurves(ids: readonly string[]) {
  const own = aliasedTable(profileCurves, 'own');
  const rows = await db
    .select({ opinionId: own.opinionId, profiles, profile_curves: profileCurves })
    .from(profileCurves)
    .innerJoin(profiles, eq(profiles.id, profileCurves.profileId))
    .innerJoin(own, eq(own.profileId, profileCurves.profileId))
    .where(
      and(
        inArray(own.opinionId, [...ids]),
        or(isNull(profileCurves.opinionId), eq(profileCurves.opinionId, own.opinionId)),
        // One row of the opinion stands for it.
        eq(own.model, GFN2),
      ),
    )
    .orderBy(sql`${profileCurves.opinionId} nulls first`, desc(profileCurves.model));
  return rows;
}

/** A stationary point as the table holds it, its energy not yet above the lowest. */
export type StationaryPointWithoutGeometry = Omit<StoredStationaryPoint, 'coordinates'>;

/** Energies above the lowest of all: one zero, since a free minimum lies a little below the grid point beside it. */
export function aboveLowest<
  Point extends { energy: number },
  Stationary extends { energy: number },
>(points: readonly Point[], stationary: readonly Stationary[]) {
  const lowest = Math.min(...[...points, ...stationary].map(({ energy }) => energy));
  const above = <T extends { energy: number }>(point: T) => ({
    ...point,
    relative: point.energy - lowest,
  });
  return { points: points.map(above), stationary: stationary.map(above) };
}

function toProfile(
  profile: typeof profiles.$inferSelect,
  curve: typeof profileCurves.$inferSelect,
  atomCount: number,
): StoredProfile {
  const geometries = unpack(curve.coordinates, atomCount);
  return {
    id: profile.id,
    torsion: profile.torsion,
    model: curve.model,
    relaxed: curve.relaxed,
    ...aboveLowest(
      // A model that gave no point at an angle has a gap there.
      profile.angles
        .map((angle, n) => ({
          angle,
          energy: curve.energies[n],
          reached: curve.reached[n],
          coordinates: geometries[n],
        }))
        .filter(({ energy }) => !Number.isNaN(energy)),
      (curve.stationary as StationaryPointWithoutGeometry[]).map((point, n) => ({
        ...point,
        coordinates: geometries[profile.angles.length + n],
      })),
    ),
  };
}
