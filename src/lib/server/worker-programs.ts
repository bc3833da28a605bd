/** Which external programs the running workers have: told by them, read by the web. */
import { eq, gt, lt, max, sql } from 'drizzle-orm';
import { programNames, type ProgramName } from '../domain/second-opinions';
import { db } from './db';
import { workerPrograms } from './db/schema';

/** A worker that has not told of itself for this long no longer counts. */
const SILENCE = sql`now() - interval '2 minutes'`;

/** Version of each program, null for those that no running worker has. */
export type ProgramVersions = Readonly<Record<ProgramName, string | null>>;

/** What the running workers have; the highest version of each where they differ. */
export async function versions(): Promise<ProgramVersions> {
  const rows = await db
    .select({ program: workerPrograms.program, version: max(workerPrograms.version) })
    .from(workerPrograms)
    .where(gt(workerPrograms.seenAt, SILENCE))
    .groupBy(workerPrograms.program);
  const of = (name: ProgramName) => rows.find(({ program }) => program === name)?.version ?? null;
  return Object.fromEntries(programNames.map((name) => [name, of(name)])) as Record<
    ProgramName,
    string | null
  >;
}

/** A worker tells what it has, and forgets workers that are long gone. */
export async function announce(
  worker: string,
  found: readonly { readonly program: ProgramName; readonly version: string }[],
): Promise<void> {
  await db.delete(workerPrograms).where(lt(workerPrograms.seenAt, sql`now() - interval '1 day'`));
  if (found.length === 0) return;
  await db
    .insert(workerPrograms)
    .values(found.map(({ program, version }) => ({ worker, program, version })))
    .onConflictDoUpdate({
      target: [workerPrograms.worker, workerPrograms.program],
      set: { version: sql`excluded.version`, seenAt: sql`now()` },
    });
}

/** A worker that ends takes its programs back. */
export async function withdraw(worker: string): Promise<void> {
  await db.delete(workerPrograms).where(eq(workerPrograms.worker, worker));
}
