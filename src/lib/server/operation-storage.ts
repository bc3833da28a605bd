/** How much room the database takes, and which team takes how much of it. */
import { count, desc, eq, sql } from 'drizzle-orm';
import { db } from './db';
import { results, teams } from './db/schema';
import { MEGABYTE } from './storage';

/** Teams that are listed. */
const LISTED = 200;

export interface TeamStorage {
  readonly id: string;
  readonly team: string;
  readonly results: number;
  readonly megabytes: number;
}

/** What the results of each team take, the most first. */
export async function storageByTeam(): Promise<TeamStorage[]> {
  const bytes = sql<number>`coalesce(sum(${results.bytes}), 0)::float8`;
  const rows = await db
    .select({ id: teams.id, team: teams.name, results: count(results.id), bytes })
    .from(teams)
    .leftJoin(results, eq(results.teamId, teams.id))
    .groupBy(teams.id)
    .orderBy(desc(bytes), teams.name)
    .limit(LISTED);
  return rows.map(({ bytes: size, ...row }) => ({ ...row, megabytes: size / MEGABYTE }));
}

/** Size of the whole database with its indexes and the queue, MB. */
export async function databaseMegabytes(): Promise<number> {
  const [{ bytes }] = await db.execute<{ bytes: number }>(
    sql`select pg_database_size(current_database())::float8 as bytes`,
  );
  return bytes / MEGABYTE;
}
