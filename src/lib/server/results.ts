/** Stored answers: found again for the same molecule, settings and version, and written exactly once. */
import { createHash } from 'node:crypto';
import { and, eq, inArray, sql } from 'drizzle-orm';
import { ENGINE_VERSION, type Request, type Result } from '../engine';
import { taskSchema } from '../domain/compute';
import { coordinatesOf } from '../domain/molfile-geometry';
import { db, type Executor } from './db';
import { batches, conformers, maps, profileCurves, profiles, results } from './db/schema';
import { pack } from './packing';
import { measure } from './storage';
import { finish, type ClaimedTask } from './tasks';

/** What an answer belongs to; together with the engine's version it is unique. */
export interface Identity {
  readonly moleculeId: string;
  readonly kind: (typeof results.$inferSelect)['kind'];
  readonly settings: unknown;
}

/** SHA-256 of settings, whatever the order of their fields. */
export function settingsDigest(settings: unknown): string {
  return createHash('sha256')
    .update(JSON.stringify(sortedFields(settings)))
    .digest('hex');
}

function sortedFields(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sortedFields);
  if (value === null || typeof value !== 'object') return value;
  return Object.fromEntries(
    Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([name, field]) => [name, sortedFields(field)]),
  );
}

/** The key under which `findStored` answers. */
export function identityOf({ moleculeId, kind, settings }: Identity): string {
  return `${moleculeId} ${kind} ${settingsDigest(settings)}`;
}

/** The results that this version of the engine already has for any of these, by their identity. */
export async function findStored(
  executor: Executor,
  wanted: readonly Identity[],
): Promise<Map<string, string>> {
  if (wanted.length === 0) return new Map();
  const rows = await executor
    .select({
      id: results.id,
      moleculeId: results.moleculeId,
      kind: results.kind,
      digest: results.settingsDigest,
    })
    .from(results)
    .where(
      and(
        inArray(results.moleculeId, [...new Set(wanted.map(({ moleculeId }) => moleculeId))]),
        eq(results.engineVersion, ENGINE_VERSION),
      ),
    );
  return new Map(rows.map((row) => [`${row.moleculeId} ${row.kind} ${row.digest}`, row.id]));
}

/** Ends a task at once where its answer was computed meanwhile for another one; false where there is none. */
export async function reuseStored(task: ClaimedTask): Promise<boolean> {
  const resultId = (await findStored(db, [task])).get(identityOf(task));
  if (resultId === undefined) return false;
  await db.transaction((transaction) => finish(transaction, task, resultId, true));
  return true;
}

/** The engine's request of a task. The settings were checked when the task was made. */
export function requestOf({ format, structure, kind, settings }: ClaimedTask): Request {
  return {
    molecule: format === 'smiles' ? { smiles: structure } : { molfile: structure },
    task: taskSchema.parse({ kind, ...(settings as object) }),
  };
}

/** Raised inside a transaction to roll it back when the task was cancelled or taken over meanwhile. */
class NoLongerHeld extends Error {}

/** What is stored of an answer: its own row, and what writes the rows that hang on it. */
export interface StoredAnswer {
  readonly engineVersion: string;
  readonly model: string;
  readonly molfile: string;
  /** All that has no table of its own. */
  readonly details: Record<string, unknown>;
  readonly warnings: unknown;
  readonly seconds: number;
  readonly rows: (executor: Executor, resultId: string) => Promise<void>;
}

/** Stores what the engine computed and marks the task done; false where the task is no longer held. */
export function store(task: ClaimedTask, result: Result): Promise<boolean> {
  const { molfile, warnings, provenance } = result;
  const { version: engineVersion, model, seconds } = provenance;
  return storeAnswer(task, {
    ...partition(result),
    engineVersion,
    model,
    molfile,
    warnings,
    seconds,
  });
}

/**
 * Stores an answer and marks its task done, in one transaction. However often a task is delivered, one result is
 * stored: a second one of the same identity gives way to the first. Nothing is stored for a task that is no longer held;
 * the answer then is false.
 */
export async function storeAnswer(task: ClaimedTask, answer: StoredAnswer): Promise<boolean> {
  try {
    await db.transaction(async (transaction) => {
      const resultId = await insertAnswer(transaction, task, answer);
      if (!(await finish(transaction, task, resultId, false))) throw new NoLongerHeld();
    });
    return true;
  } catch (error) {
    if (!(error instanceof NoLongerHeld)) throw error;
    return false;
  }
}

async function insertAnswer(
  executor: Executor,
  task: ClaimedTask,
  { rows, ...answer }: StoredAnswer,
): Promise<string> {
  const identity = {
    moleculeId: task.moleculeId,
    kind: task.kind,
    settingsDigest: settingsDigest(task.settings),
    engineVersion: answer.engineVersion,
  };
  const [inserted] = await executor
    .insert(results)
    .values({
      ...answer,
      ...identity,
      teamId: task.teamId,
      settings: task.settings,
      madeFor: sql`(select ${batches.createdBy} from ${batches} where ${batches.id} = ${task.batchId})`,
    })
    .onConflictDoNothing()
    .returning({ id: results.id });
  if (inserted) {
    await rows(executor, inserted.id);
    await measure(executor, inserted.id);
    return inserted.id;
  }
  const [{ id }] = await executor
    .select({ id: results.id })
    .from(results)
    .where(
      and(
        eq(results.moleculeId, identity.moleculeId),
        eq(results.kind, identity.kind),
        eq(results.settingsDigest, identity.settingsDigest),
        eq(results.engineVersion, identity.engineVersion),
      ),
    );
  return id;
}

type Partition = Pick<StoredAnswer, 'rows' | 'details'>;

/** Parts an answer into the rows of its tables and the rest. */
function partition(result: Result): Partition {
  const { molfile: _molfile, smiles: _smiles, warnings: _warnings, provenance, ...fields } = result;
  if ('conformers' in fields) return partitionConformers(fields);
  if ('points' in fields) return partitionScan(fields, provenance.model);
  if ('cells' in fields) return partitionMap(fields);
  return { rows: () => Promise.resolve(), details: { ...fields } };
}

function partitionConformers(
  fields: Pick<Result<'conformers'>, 'conformers' | 'complete' | 'ended'>,
): Partition {
  const { conformers: found, ...details } = fields;
  return {
    details,
    rows: async (executor, resultId) => {
      await executor.insert(conformers).values(
        found.map((conformer, rank) => ({
          resultId,
          rank,
          energy: conformer.energy,
          relative: conformer.relative,
          degeneracy: conformer.degeneracy,
          population: conformer.population,
          rmsdToLowest: conformer.rmsdToLowest,
          coordinates: pack([coordinatesOf(conformer.molfile)]),
          vibrations: conformer.vibrations,
        })),
      );
    },
  };
}

function partitionScan(
  fields: Omit<Result<'scan'>, 'molfile' | 'smiles' | 'warnings' | 'provenance'>,
  model: string,
): Partition {
  const { points, stationary, torsion, ...details } = fields;
  return {
    details,
    rows: async (executor, resultId) => {
      const [{ profileId }] = await executor
        .insert(profiles)
        .values({ resultId, torsion: [...torsion], angles: points.map(({ angle }) => angle) })
        .returning({ profileId: profiles.id });
      await executor.insert(profileCurves).values({
        profileId,
        model,
        relaxed: fields.relaxed,
        energies: points.map(({ energy }) => energy),
        reached: points.map(({ reached }) => reached),
        coordinates: pack([...points, ...stationary].map(({ molfile }) => coordinatesOf(molfile))),
        stationary: stationary.map(({ molfile: _molfile, ...point }) => point),
      });
    },
  };
}

function partitionMap(
  fields: Omit<Result<'map'>, 'molfile' | 'smiles' | 'warnings' | 'provenance'>,
): Partition {
  const { cells, minima, torsions, step, perAxis, ...details } = fields;
  const reached = cells.flatMap(({ molfile }) => molfile ?? []);
  return {
    details,
    rows: async (executor, resultId) => {
      await executor.insert(maps).values({
        resultId,
        torsions,
        step,
        perAxis,
        energies: cells.map(({ energy }) => energy),
        coordinates: pack(
          [...reached, ...minima.map(({ molfile }) => molfile)].map((molfile) =>
            coordinatesOf(molfile),
          ),
        ),
        minima: minima.map(({ angles, energy, cell }) => ({ angles, energy, cell })),
      });
    },
  };
}
