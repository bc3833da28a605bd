/** How much room the database takes, and which team takes how much of it. */
import { sql } from 'drizzle-orm';
import { db } from './db';

const MEGABYTE = 1_000_000;
/** Adding up reads every result, so the sums are kept for a while. */
const KEPT_MS = 5 * 60_000;

export interface TeamStorage {
  readonly id: string;
  readonly team: string;
  readonly results: number;
  readonly megabytes: number;
}

let kept: { readonly at: Date; readonly teams: Promise<TeamStorage[]> } | null = null;

/** What the results of each team take as stored, the most first, as of a time at most five minutes ago. */
export async function storageByTeam(): Promise<{ at: Date; teams: readonly TeamStorage[] }> {
  if (!kept || Date.now() - kept.at.getTime() > KEPT_MS) {
    kept = { at: new Date(), teams: addUp() };
    kept.teams.catch(() => (kept = null));
  }
  const { at, teams } = kept;
  return { at, teams: await teams };
}

async function addUp(): Promise<TeamStorage[]> {
  const rows = await db.execute<{ id: string; team: string; results: number; bytes: number }>(sql`
    select teams.id, teams.name as team, count(results.id)::int as results,
      coalesce(sum(pg_column_size(results.*) + coalesce(c.bytes, 0) + coalesce(p.bytes, 0) + coalesce(m.bytes, 0)), 0)::float8 as bytes
    from teams
    left join results on results.team_id = teams.id
    left join lateral (select sum(pg_column_size(conformers.*)) as bytes from conformers
      where conformers.result_id = results.id) c on true
    left join lateral (select sum(pg_column_size(profile_curves.*)) as bytes from profiles
      join profile_curves on profile_curves.profile_id = profiles.id where profiles.result_id = results.id) p on true
    left join lateral (select pg_column_size(maps.*) as bytes from maps where maps.result_id = results.id) m on true
    group by teams.id order by bytes desc, teams.name limit 200`);
  return rows.map(({ bytes, ...row }) => ({ ...row, megabytes: bytes / MEGABYTE }));
}

/** Size of the whole database with its indexes and the queue, MB. */
export async function databaseMegabytes(): Promise<number> {
  const [{ bytes }] = await db.execute<{ bytes: number }>(
    sql`select pg_database_size(current_database())::float8 as bytes`,
  );
  return bytes / MEGABYTE;
}
