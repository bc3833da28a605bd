/** Second opinions on torsion scans: asked for, handed to workers, stored beside the scan. */
import { and, eq, isNull, sql } from 'drizzle-orm';
import { opinionSettingsSchema, type OpinionSettings } from '../domain/second-opinions';
import { ENGINE_VERSION, type Molecule } from '../engine';
import { db } from './db';
import { molecules, profileCurves, profiles, results } from './db/schema';
import type { Member } from './member';
import { readStored } from './molecules';
import { pack, unpack } from './packing';
import { ask, ProgramRequestError, resultAskedAbout, type ProgramTask } from './program-tasks';
import { storeAnswer } from './results';
import { measure } from './storage';
import type { ClaimedTask } from './tasks';

/** Asks for a second opinion on a stored MMFF94s scan of the molecule. */
export async function request(
  member: Member,
  moleculeId: string,
  settings: OpinionSettings,
): Promise<ProgramTask> {
  const scan = await resultAskedAbout(member, moleculeId, settings.result);
  const { relaxed } = scan.settings as { relaxed?: boolean };
  if (scan.kind !== 'scan' || scan.model !== 'MMFF94s' || relaxed === false) {
    throw new ProgramRequestError('A second opinion needs a relaxed torsion scan by MMFF94s.');
  }
  return ask(member, { moleculeId, kind: 'opinion', settings, about: settings.result });
}

/** A stored scan as the worker takes it. */
export interface ScanForOpinion {
  readonly settings: OpinionSettings;
  readonly molecule: Molecule;
  readonly molfile: string;
  readonly profileId: string;
  readonly torsion: readonly number[];
  readonly angles: readonly number[];
  /** Å, 3N each, in the order of the angles. */
  readonly geometries: readonly Float64Array[];
}

/** The scan that a task is about; null when it has been deleted meanwhile. */
export async function scanOf(task: ClaimedTask): Promise<ScanForOpinion | null> {
  const settings = opinionSettingsSchema.parse(task.settings);
  const [found] = await db
    .select({
      profile: profiles,
      coordinates: profileCurves.coordinates,
      molfile: results.molfile,
      molecule: molecules,
    })
    .from(results)
    .innerJoin(molecules, eq(molecules.id, results.moleculeId))
    .innerJoin(profiles, eq(profiles.resultId, results.id))
    .innerJoin(
      profileCurves,
      and(eq(profileCurves.profileId, profiles.id), isNull(profileCurves.opinionId)),
    )
    .where(and(eq(results.id, settings.result), eq(results.teamId, task.teamId)));
  if (!found) return null;
  const { profile, coordinates, molfile, molecule } = found;
  return {
    settings,
    molecule: readStored(molecule),
    molfile,
    profileId: profile.id,
    torsion: profile.torsion,
    angles: profile.angles,
    geometries: unpack(coordinates, molecule.atomCount).slice(0, profile.angles.length),
  };
}

/** One model's curve as a worker found it; null for a gap. */
export interface OpinionCurve {
  readonly model: string;
  readonly points: readonly ({
    readonly energy: number;
    readonly reached: number;
    readonly coordinates: Float64Array;
  } | null)[];
}

export interface OpinionOutcome {
  readonly curves: readonly OpinionCurve[];
  readonly gaps: readonly {
    readonly angle: number;
    readonly model: string;
    readonly reason: string;
  }[];
  /** The program and its version: "xtb 6.5.1". */
  readonly program: string;
  readonly seconds: number;
}

/** Stores an opinion beside its scan and marks the task done; a newer opinion of the same models takes the older one's place. */
export function store(
  task: ClaimedTask,
  scan: ScanForOpinion,
  { curves, gaps, program, seconds }: OpinionOutcome,
): Promise<boolean> {
  const nothing = new Float64Array(3 * scan.molecule.atomCount).fill(NaN);
  return storeAnswer(task, {
    engineVersion: ENGINE_VERSION,
    model: curves.map(({ model }) => model).join(', '),
    molfile: scan.molfile,
    details: { depth: scan.settings.depth, program, gaps },
    warnings: [],
    seconds,
    rows: async (executor, resultId) => {
      const rows = curves.map(({ model, points }) => ({
        profileId: scan.profileId,
        model,
        relaxed: scan.settings.depth === 'relaxed',
        opinionId: resultId,
        energies: points.map((point) => point?.energy ?? NaN),
        reached: points.map((point) => point?.reached ?? NaN),
        coordinates: pack(points.map((point) => point?.coordinates ?? nothing)),
        stationary: [],
      }));
      await executor
        .insert(profileCurves)
        .values(rows)
        .onConflictDoUpdate({
          target: [profileCurves.profileId, profileCurves.model, profileCurves.relaxed],
          set: {
            opinionId: sql`excluded.opinion_id`,
            energies: sql`excluded.energies`,
            reached: sql`excluded.reached`,
            coordinates: sql`excluded.coordinates`,
            createdAt: sql`now()`,
          },
        });
      // The curves hang on the scan's profile, and count as its size.
      await measure(executor, scan.settings.result);
    },
  });
}
