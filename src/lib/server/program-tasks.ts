/** Tasks of external programs: asked for one at a time, about what is stored already. */
import { error } from '@sveltejs/kit';
import { and, desc, eq, inArray, isNotNull, sql } from 'drizzle-orm';
import {
  howToAdd,
  programFor,
  programOfKind,
  programTaskKinds,
  type ProgramTaskKind,
} from '../domain/second-opinions';
import { db, type Executor } from './db';
import { batches, entries, molecules, results, tasks } from './db/schema';
import { recordEvent } from './events';
import { checkRoom, lockTeam } from './limits';
import { tell } from './live';
import { notFound, require, type Member } from './member';
import { enqueue } from './queue';
import { findStored, identityOf, settingsDigest } from './results';
import { get as getMolecule } from './molecules';
import { queueAgain } from './queue-again';
import { waitingOf } from './tasks';
import { versions } from './worker-programs';

/** Why something cannot be asked for, in a sentence for people. */
export class ProgramRequestError extends Error {}

/** Answers 422 with the reason where a request was refused; throws on what it knows nothing about. */
export function refuseAsProblem(cause: unknown): never {
  if (cause instanceof ProgramRequestError) error(422, cause.message);
  throw cause;
}

export interface ProgramRequest {
  readonly moleculeId: string;
  readonly kind: ProgramTaskKind;
  readonly settings: Record<string, unknown>;
  /** The stored result it is about; where it is named, the task joins the row that result was made for. */
  readonly about?: string;
}

/** What became of a request: the task that carries it out, and whether anything is left to do. */
export interface ProgramTask {
  readonly taskId: string;
  readonly state: 'queued' | 'running' | 'done';
}

/** The result of the member's team that something is asked about; 404 where the molecule has none such. */
export async function resultAskedAbout(member: Member, moleculeId: string, resultId: string) {
  require(member, 'submit molecules');
  const [result] = await db
    .select({ kind: results.kind, model: results.model, settings: results.settings })
    .from(results)
    .where(
      and(
        eq(results.id, resultId),
        eq(results.moleculeId, moleculeId),
        eq(results.teamId, member.teamId),
      ),
    );
  return result ?? notFound('result');
}

/**
 * Asks for a task of an external program. One that waits, runs or is answered already is not made again, and a failed
 * or cancelled one is tried again. Throws ProgramRequestError when no worker has the program.
 */
export async function ask(member: Member, request: ProgramRequest): Promise<ProgramTask> {
  require(member, 'submit molecules');
  const program = programOfKind[request.kind];
  return db.transaction(async (transaction) => {
    await lockTeam(transaction, member.teamId);
    // Two who ask at once for the same thing take turns here, so that the second finds the first one's task.
    const [molecule] = await transaction
      .select({ id: molecules.id })
      .from(molecules)
      .where(and(eq(molecules.id, request.moleculeId), eq(molecules.teamId, member.teamId)))
      .for('update');
    if (!molecule) notFound('molecule');
    const known = await sameTask(transaction, member, request);
    if (known && known.state !== 'failed' && known.state !== 'cancelled') {
      return { taskId: known.id, state: known.state };
    }
    const stored = (await findStored(transaction, [request])).get(identityOf(request));
    if (stored === undefined && (await versions())[program] === null) {
      throw new ProgramRequestError(howToAdd(program));
    }
    if (known) {
      await queueAgain(transaction, [known], await waitingOf(transaction, member));
      await checkRoom(transaction, member, 1);
      await tell(transaction, 'batch-changed', [known.batchId]);
      return { taskId: known.id, state: 'queued' };
    }
    return write(transaction, member, request, stored ?? null);
  });
}

/** The newest task of the team that does the same, whatever its state. */
async function sameTask(executor: Executor, member: Member, request: ProgramRequest) {
  const rows = await executor
    .select({
      id: tasks.id,
      kind: tasks.kind,
      state: tasks.state,
      batchId: tasks.batchId,
      settings: tasks.settings,
      resultId: tasks.resultId,
    })
    .from(tasks)
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(
      and(
        eq(entries.moleculeId, request.moleculeId),
        eq(batches.teamId, member.teamId),
        eq(tasks.kind, request.kind),
      ),
    )
    .orderBy(desc(tasks.createdAt));
  const digest = settingsDigest(request.settings);
  const isAnswered = (row: (typeof rows)[number]) => row.state !== 'done' || row.resultId !== null;
  return rows.find((row) => settingsDigest(row.settings) === digest && isAnswered(row)) ?? null;
}

async function write(
  executor: Executor,
  member: Member,
  request: ProgramRequest,
  resultId: string | null,
): Promise<ProgramTask> {
  const { batchId, entryId } = await rowOf(executor, member, request);
  const { kind, settings } = request;
  const done = {
    state: 'done' as const,
    progress: 1,
    resultId,
    reused: true,
    finishedAt: sql`now()`,
  };
  const [{ taskId, state }] = await executor
    .insert(tasks)
    .values({ batchId, entryId, kind, settings, ...(resultId === null ? {} : done) })
    .returning({ taskId: tasks.id, state: tasks.state });
  if (resultId === null) {
    await checkRoom(executor, member, 1);
    const priority = -(await waitingOf(executor, member));
    await enqueue(executor, [{ id: taskId, priority, program: programFor(kind) }]);
  }
  await recordEvent(executor, member, `ask for ${kind}`, `molecule:${request.moleculeId}`, {
    ...settings,
  });
  await tell(executor, 'batch-changed', [batchId]);
  return { taskId, state: state as ProgramTask['state'] };
}

/** The row of a batch that the task joins: that of the result it is about, else the molecule's newest. */
async function rowOf(executor: Executor, member: Member, { moleculeId, about }: ProgramRequest) {
  const [row] = await executor
    .select({ batchId: batches.id, entryId: entries.id })
    .from(entries)
    .innerJoin(batches, eq(batches.id, entries.batchId))
    .leftJoin(tasks, eq(tasks.entryId, entries.id))
    .where(
      and(
        eq(entries.moleculeId, moleculeId),
        eq(batches.teamId, member.teamId),
        isNotNull(batches.submittedAt),
        about === undefined ? undefined : eq(tasks.resultId, about),
      ),
    )
    .orderBy(desc(batches.submittedAt))
    .limit(1);
  return row ?? notFound('result');
}

/** A task of an external program as its molecule's page shows it while it is not done. */
export interface OpenProgramTask {
  readonly id: string;
  readonly batchId: string;
  readonly kind: ProgramTaskKind;
  readonly settings: Readonly<Record<string, unknown>>;
  readonly state: 'queued' | 'running' | 'failed' | 'cancelled';
  readonly progress: number;
  readonly stage: string;
  readonly error: { readonly message: string } | null;
}

/** What is not done among a molecule's tasks of external programs, the newest first. */
export async function open(member: Member, moleculeId: string): Promise<OpenProgramTask[]> {
  await getMolecule(member, moleculeId);
  const rows = await db
    .select({
      id: tasks.id,
      batchId: tasks.batchId,
      kind: tasks.kind,
      settings: tasks.settings,
      state: tasks.state,
      progress: tasks.progress,
      stage: tasks.stage,
      error: tasks.error,
    })
    .from(tasks)
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .innerJoin(batches, eq(batches.id, tasks.batchId))
    .where(
      and(
        eq(entries.moleculeId, moleculeId),
        eq(batches.teamId, member.teamId),
        inArray(tasks.kind, [...programTaskKinds]),
        inArray(tasks.state, ['queued', 'running', 'failed', 'cancelled']),
      ),
    )
    .orderBy(desc(tasks.createdAt))
    .limit(50);
  return rows as OpenProgramTask[];
}
