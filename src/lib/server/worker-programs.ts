/** Which external programs the running workers have: told with their signs of life, read by the web. */
import { and, gt, ne, sql } from 'drizzle-orm';
import { programNames, type ProgramName } from '../domain/second-opinions';
import { db } from './db';
import { workers } from './db/schema';

/** A worker that has not shown a sign of life for this long no longer counts. */
const SILENCE = sql`now() - interval '2 minutes'`;

/** Version of each program, null for those that no running worker has. */
export type ProgramVersions = Readonly<Record<ProgramName, string | null>>;

/** What the running workers have; the highest version of each where they differ. */
export async function versions(): Promise<ProgramVersions> {
  const rows = await db
    .select({ programs: workers.programs })
    .from(workers)
    .where(and(ne(workers.state, 'gone'), gt(workers.beatAt, SILENCE)));
  const of = (name: ProgramName) =>
    rows
      .flatMap(({ programs }) => programs[name] ?? [])
      .sort()
      .at(-1) ?? null;
  return Object.fromEntries(programNames.map((name) => [name, of(name)])) as Record<
    ProgramName,
    string | null
  >;
}
