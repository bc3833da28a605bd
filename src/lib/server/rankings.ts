/** Conformers ranked again by GFN2-xTB: asked for, handed to workers, stored as conformers of their own. */
import { and, asc, eq, lte } from 'drizzle-orm';
import {
  GFN2,
  RANKING_LIMIT,
  rankingSettingsSchema,
  type RankingSettings,
} from '../domain/second-opinions';
import { ENGINE_VERSION, writeMolfile, type Molecule, type Reordered } from '../engine';
import { boltzmannPopulations } from '../engine/light';
import { db } from './db';
import { conformers, molecules, results } from './db/schema';
import type { Member } from './member';
import { readStored } from './molecules';
import { pack, unpack } from './packing';
import { ask, ProgramRequestError, resultAskedAbout, type ProgramTask } from './program-tasks';
import { storeAnswer } from './results';
import type { ClaimedTask } from './tasks';

/** Asks for the conformers of a stored search to be ranked again. */
export async function request(
  member: Member,
  moleculeId: string,
  settings: RankingSettings,
): Promise<ProgramTask> {
  const search = await resultAskedAbout(member, moleculeId, settings.result);
  if (search.kind !== 'conformers') {
    throw new ProgramRequestError('Only the conformers of a search can be ranked again.');
  }
  return ask(member, { moleculeId, kind: 'ranking', settings, about: settings.result });
}

/** A stored search as the worker takes it: its conformers within the window, lowest first. */
export interface SearchForRanking {
  readonly settings: RankingSettings;
  readonly molecule: Molecule;
  /** K */
  readonly temperature: number;
  readonly conformers: readonly { readonly rank: number; readonly coordinates: Float64Array }[];
}

/** The search that a task is about; null when it has been deleted meanwhile. */
export async function searchOf(task: ClaimedTask): Promise<SearchForRanking | null> {
  const settings = rankingSettingsSchema.parse(task.settings);
  const [found] = await db
    .select({ molecule: molecules, settings: results.settings })
    .from(results)
    .innerJoin(molecules, eq(molecules.id, results.moleculeId))
    .where(and(eq(results.id, settings.result), eq(results.teamId, task.teamId)));
  if (!found) return null;
  const rows = await db
    .select({ rank: conformers.rank, coordinates: conformers.coordinates })
    .from(conformers)
    .where(and(eq(conformers.resultId, settings.result), lte(conformers.relative, settings.window)))
    .orderBy(asc(conformers.rank))
    .limit(RANKING_LIMIT);
  return {
    settings,
    molecule: readStored(found.molecule),
    temperature: (found.settings as { temperature: number }).temperature,
    conformers: rows.map(({ rank, coordinates }) => ({
      rank,
      coordinates: unpack(coordinates, found.molecule.atomCount)[0],
    })),
  };
}

export interface RankingOutcome {
  /** The conformers that have a number, each with its rank in the search. */
  readonly points: readonly {
    readonly rank: number;
    readonly energy: number;
    readonly coordinates: Float64Array;
  }[];
  readonly gaps: readonly { readonly rank: number; readonly reason: string }[];
  /** The program and its version: "xtb 6.5.1". */
  readonly program: string;
  readonly seconds: number;
}

/** Stores the new order and marks the task done. `details.from` has the ranks in the search that each came from. */
export function store(
  task: ClaimedTask,
  search: SearchForRanking,
  { points, gaps, program, seconds }: RankingOutcome,
  ordered: readonly Reordered[],
): Promise<boolean> {
  const [lowest] = ordered;
  const relative = ordered.map(({ energy }) => energy - lowest.energy);
  const populations = boltzmannPopulations(
    relative,
    ordered.map(({ degeneracy }) => degeneracy),
    search.temperature,
  );
  return storeAnswer(task, {
    engineVersion: ENGINE_VERSION,
    model: GFN2,
    molfile: writeMolfile(search.molecule, lowest.coordinates),
    details: {
      depth: search.settings.depth,
      temperature: search.temperature,
      program,
      gaps,
      from: ordered.map(({ from }) => from.map((position) => points[position].rank)),
    },
    warnings: [],
    seconds,
    rows: async (executor, resultId) => {
      await executor.insert(conformers).values(
        ordered.map(({ energy, degeneracy, rmsdToLowest, coordinates }, rank) => ({
          resultId,
          rank,
          energy,
          relative: relative[rank],
          degeneracy,
          population: populations[rank],
          rmsdToLowest,
          coordinates: pack([coordinates]),
        })),
      );
    },
  });
}
