/** The database ends in the middle of a batch, as in a crash, and comes back. */
import { expect, test, type Page } from '@playwright/test';
import postgres from 'postgres';
import {
  adminUrl,
  compute,
  databaseUrl,
  open,
  readPasted,
  signInAs,
  waitUntilDone,
} from '../support/pages';
import { until } from '../support/until';

const molecules = Array.from({ length: 8 }, (_, n) => `${'C'.repeat(n + 1)}OC=C ether ${n}`);

/** Ends the server at once, without a word to its clients; what keeps it running starts it again. */
async function crashDatabase(): Promise<void> {
  const admin = postgres(adminUrl(), { max: 1 });
  const [{ pid }] =
    await admin`select split_part(pg_read_file('postmaster.pid'), E'\n', 1)::int as pid`;
  process.kill(pid, 'SIGQUIT');
  await admin.end({ timeout: 1 }).catch(() => undefined);
}

async function countsOf(page: Page, batch: string) {
  const response = await page.request.get(`${batch}/progress`);
  return response.ok() ? ((await response.json()).counts as Record<string, number>) : null;
}

test('nothing is lost, done twice or left open', async ({ page }) => {
  await signInAs(page, 'modeler');
  await readPasted(page, 'Through a crash', molecules.join('\n'));
  await compute(page);
  const batch = page.url();
  // The demo's own batches may stand before it in the modeler's line.
  const isHalfWay = async () => {
    const counts = await countsOf(page, batch);
    return counts && counts.done >= 2 && counts.running > 0 && counts.queued > 0;
  };
  await until('the batch to be half-way', isHalfWay, 200);
  await crashDatabase();

  // Neither the page nor the programs are told or started anew.
  await waitUntilDone(page);
  const sql = postgres(databaseUrl(), { max: 1 });
  try {
    const id = batch.split('/').at(-1)!;
    const tasks = await sql`
      select t.state, t.result_id, (select count(*)::int from results r where r.id = t.result_id) as results
      from tasks t where t.batch_id = ${id}`;
    expect(tasks.length).toBeGreaterThan(molecules.length);
    for (const task of tasks) expect(task).toMatchObject({ state: 'done', results: 1 });
    expect(new Set(tasks.map((task) => task.result_id)).size).toBe(tasks.length);
    await until('the queue to let go of every job', async () => {
      const [{ jobs }] = await sql`
        select count(*)::int as jobs from pgboss.job j join tasks t on t.id = j.id
        where t.batch_id = ${id} and j.state in ('created', 'retry', 'active')`;
      return jobs === 0;
    });
  } finally {
    await sql.end();
  }
  await open(page, '/desk');
  await expect(page.getByRole('link', { name: 'Through a crash' }).first()).toBeVisible();
});
