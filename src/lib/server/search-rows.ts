/** What a list of found molecules says of each. */
import { sql } from 'drizzle-orm';
import { db } from './db';
import type { StateCounts } from './batches';
import type { Member } from './member';

export interface FoundMolecule extends StateCounts {
  readonly id: string;
  /** Its name in the newest batch that holds it. */
  readonly name: string;
  readonly formula: string;
  readonly smiles: string;
  readonly batchId: string;
  readonly batchName: string;
  /** How many further batches hold it. */
  readonly otherBatches: number;
  /** Threads of notes that nobody has resolved. */
  readonly openNotes: number;
  /** How many torsion profiles there are to compare. */
  readonly profiles: number;
}

/** Describes molecules of the member's team, in the order of their ids. */
export async function describeMolecules(
  { teamId }: Member,
  ids: readonly string[],
): Promise<FoundMolecule[]> {
  if (ids.length === 0) return [];
  const list = sql.join(
    ids.map((id) => sql`${id}::uuid`),
    sql`, `,
  );
  const rows = await db.execute<Record<keyof FoundMolecule, unknown>>(sql`
    select m.id, m.formula, m.smiles, e.name, e.batch_id as "batchId", e.batch_name as "batchName",
      t.*,
      (select count(distinct b.id)::int - 1 from entries e join batches b on b.id = e.batch_id
        where e.molecule_id = m.id and b.submitted_at is not null) as "otherBatches",
      (select count(*)::int from notes n
        where n.molecule_id = m.id and n.parent_id is null and n.resolved_at is null) as "openNotes",
      (select count(*)::int from results r join profiles p on p.result_id = r.id
        where r.molecule_id = m.id) as profiles
    from molecules m
    cross join lateral (
      select e.name, b.id as batch_id, b.name as batch_name
      from entries e join batches b on b.id = e.batch_id
      where e.molecule_id = m.id and b.submitted_at is not null
      order by b.submitted_at desc, e.position limit 1
    ) e
    cross join lateral (
      select (count(*) filter (where t.state = 'queued'))::int as queued,
        (count(*) filter (where t.state = 'running'))::int as running,
        (count(*) filter (where t.state = 'done'))::int as done,
        (count(*) filter (where t.state = 'failed'))::int as failed,
        (count(*) filter (where t.state = 'cancelled'))::int as cancelled
      from entries e join tasks t on t.entry_id = e.id where e.molecule_id = m.id
    ) t
    where m.team_id = ${teamId} and m.id in (${list})`);
  const byId = new Map(rows.map((row) => [row.id, row as unknown as FoundMolecule]));
  return ids.flatMap((id) => byId.get(id) ?? []);
}
