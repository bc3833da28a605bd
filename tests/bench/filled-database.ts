/** A team with 20,000 molecules, all computed: copies of a molecule of the demo and of its results, made in the database. */
import postgres from 'postgres';
import { until } from '../support/until';

export const MOLECULES = 20_000;
const SMALL_BATCHES = 200;
const SMALL_BATCH_ROWS = 100;

/** Where the bench's pages are. */
export interface FilledDatabase {
  readonly largeBatch: string;
  readonly molecule: string;
}

/** Fills the demo's team once its own batches are computed. */
export async function fillDatabase(url: string): Promise<FilledDatabase> {
  const sql = postgres(url, { max: 1, onnotice: () => undefined });
  try {
    await until(
      'the demo to be computed',
      async () => {
        const [row] = await sql`select count(*)::int as open from tasks where finished_at is null`;
        return row.open === 0;
      },
      600,
    );
    const [seed] = await sql`
      select m.id, m.team_id, b.created_by from molecules m
      join entries e on e.molecule_id = m.id join batches b on b.id = e.batch_id
      where m.smiles = 'C=CC=C' and b.submitted_at is not null limit 1`;
    await copyMolecules(sql, seed.id);
    const [largeBatch] = await addBatches(sql, seed.team_id, seed.created_by);
    await sql`vacuum analyze`;
    return { largeBatch, molecule: seed.id };
  } finally {
    await sql.end();
  }
}

/** Copies a molecule and everything computed for it. The digest tells copies apart; `origin` maps old ids to new. */
async function copyMolecules(sql: postgres.Sql, seedId: string): Promise<void> {
  await sql`create temporary table new_molecules as
    select gen_random_uuid() as id, n from generate_series(1, ${MOLECULES}) n`;
  await sql`
    insert into molecules (id, team_id, digest, smiles, formula, atom_count, rotors, format, structure, has_geometry)
    select new.id, team_id, digest || '-' || n, smiles, formula, atom_count, rotors, format, structure, has_geometry
    from molecules, new_molecules new where molecules.id = ${seedId}`;
  await sql`create temporary table new_results as
    select gen_random_uuid() as id, new.id as molecule_id, results.id as origin
    from results, new_molecules new where results.molecule_id = ${seedId}`;
  await sql`
    insert into results (id, team_id, molecule_id, kind, settings, settings_digest, engine_version, model, molfile, details, warnings, seconds)
    select new.id, team_id, new.molecule_id, kind, settings, settings_digest, engine_version, model, molfile, details, warnings, seconds
    from results join new_results new on new.origin = results.id`;
  await sql`
    insert into conformers
    select new.id, rank, energy, relative, degeneracy, population, rmsd_to_lowest, coordinates
    from conformers join new_results new on new.origin = conformers.result_id`;
  await sql`create temporary table new_profiles as
    select gen_random_uuid() as id, new.id as result_id, profiles.id as origin
    from profiles join new_results new on new.origin = profiles.result_id`;
  await sql`
    insert into profiles (id, result_id, torsion, angles)
    select new.id, new.result_id, torsion, angles from profiles join new_profiles new on new.origin = profiles.id`;
  await sql`
    insert into profile_curves (profile_id, model, relaxed, energies, reached, coordinates, stationary)
    select new.id, model, relaxed, energies, reached, coordinates, stationary
    from profile_curves join new_profiles new on new.origin = profile_curves.profile_id`;
}

/** One batch with all molecules, and many small ones with some; every hundredth row failed. Returns their ids. */
async function addBatches(sql: postgres.Sql, teamId: string, maker: string): Promise<string[]> {
  await sql`create temporary table new_batches as
    select gen_random_uuid() as id, n from generate_series(0, ${SMALL_BATCHES}) n`;
  await sql`
    insert into batches (id, team_id, created_by, name, source, plan, submitted_at)
    select id, ${teamId}, ${maker}, 'Batch ' || n, 'upload', '{}', now() - make_interval(mins => n) from new_batches`;
  await sql`
    insert into entries (batch_id, position, line, name, molecule_id, verdict)
    select b.id, m.n, m.n, 'copy ' || m.n, m.id, 'ready' from new_batches b, new_molecules m
    where b.n = 0 or m.n % ${SMALL_BATCHES} = b.n % ${SMALL_BATCHES} and m.n <= ${SMALL_BATCHES * SMALL_BATCH_ROWS}`;
  await sql`
    insert into tasks (batch_id, entry_id, kind, settings, state, progress, error, result_id, finished_at)
    select e.batch_id, e.id, r.kind, r.settings,
      (case when failed then 'failed' else 'done' end)::task_state, 1,
      case when failed then '{"code": "time-limit", "message": "The task was stopped at its time limit."}'::jsonb end,
      case when failed then null else r.id end, now()
    from entries e join new_batches b on b.id = e.batch_id join results r on r.molecule_id = e.molecule_id,
      lateral (select e.position % 100 = 0 as failed) f`;
  return (await sql`select id from new_batches order by n`).map(({ id }) => String(id));
}
