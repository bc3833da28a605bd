/** The desk and the front page, the rows one chooses, and what each role finds in the browser. */
import { readFileSync } from 'node:fs';
import { expect, test } from '@playwright/test';
import { unzipSync } from 'fflate';
import {
  compute,
  demoMembers,
  expectAccessible,
  open,
  openBatch,
  readPasted,
  signInAs,
  waitUntilDone,
} from '../support/pages';
import { until } from '../support/until';

test('visitors see a turn that was computed here', async ({ page }) => {
  // The server looks again while the demo is not computed yet.
  await until(
    'the example',
    async () => {
      await open(page, '/');
      return page.getByText('buta-1,3-diene', { exact: false }).isVisible();
    },
    240,
  );
  // MMFF94s: gauche butadiene 2.47, barrier 6.18 kcal/mol.
  await expect(page.getByText(/s-trans is preferred by 2[.]5 kcal\/mol.*6[.]2/)).toBeVisible();
  await expectAccessible(page);
});

test('a modeler finds drafts, trouble, batches and answers on the desk', async ({ page }) => {
  await signInAs(page, 'modeler');
  await readPasted(page, 'Left for later', 'C1CCCCC1C=C\nnonsense');
  await open(page, '/desk');
  const needs = page.getByRole('region', { name: 'Needs you' });
  await expect(needs.getByText('A draft of 2 rows')).toBeVisible();
  await needs.getByRole('link', { name: 'Continue Left for later' }).click();
  await page.waitForURL('**/preview');
  await page.goBack();
  await needs.getByRole('button', { name: 'Discard Left for later' }).click();
  await expect(page.getByText('Left for later')).toHaveCount(0);

  const batches = page.getByRole('region', { name: 'Your batches' });
  await expect(
    batches.getByRole('link', { name: 'Biaryls for the topcoat', exact: true }),
  ).toBeVisible();
  await expect(needs.getByText(/has no parameters for atom \d+ \(B\)/)).toBeVisible({
    timeout: 240_000,
  });
  const answers = page.getByRole('region', { name: 'Finished lately' });
  await expect(answers.getByText(/kcal\/mol to turn/).first()).toBeVisible();
  await expectAccessible(page);
  await answers.getByRole('link').first().click();
  await page.waitForURL(/molecules/);
});

test('chosen rows make a bundle of their own', async ({ page }) => {
  await signInAs(page, 'reader');
  await openBatch(page, 'Dienes for the primer');
  await page.getByRole('checkbox', { name: 'Choose all rows of this page' }).check();
  await expect(page.getByRole('link', { name: 'Download 7 chosen' })).toBeVisible();
  await page.getByRole('button', { name: 'Clear' }).click();
  for (const name of ['isoprene', 'chloroprene']) {
    await page.getByRole('checkbox', { name: `Choose ${name}` }).check();
  }
  await expectAccessible(page);
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('link', { name: 'Download 2 chosen' }).click(),
  ]);
  const paths = Object.keys(unzipSync(readFileSync(await download.path())));
  const folders = new Set(
    paths.filter((path) => path.includes('/')).map((path) => path.split('/')[0]),
  );
  expect([...folders].sort()).toEqual(['chloroprene', 'isoprene']);
});

test('a modeler stops chosen rows and runs them again', async ({ page }) => {
  await signInAs(page, 'modeler');
  const chains = [12, 13, 14].map((length) => `${'C(O)'.repeat(length)} chain ${length}`);
  await readPasted(page, 'Stopped and started', chains.join('\n'));
  await compute(page);
  for (const length of [12, 13]) {
    await page.getByRole('checkbox', { name: `Choose chain ${length}` }).check();
  }
  await page.getByRole('button', { name: 'Cancel 2 chosen' }).click();
  await expect(page.getByRole('button', { name: 'Run again 2 chosen' })).toBeVisible();
  await expect(page.getByRole('row', { name: /chain 12/ }).getByText('Cancelled')).toBeVisible();
  await page.getByRole('button', { name: 'Run again 2 chosen' }).click();
  await expect(page.getByRole('button', { name: 'Cancel 2 chosen' })).toBeVisible();
  await page.getByRole('button', { name: 'Cancel the rest' }).click();
  await waitUntilDone(page);
});

for (const role of Object.keys(demoMembers) as (keyof typeof demoMembers)[]) {
  test(`a ${role} finds what the role allows, and no more`, async ({ page }) => {
    const submits = role !== 'reader';
    const steers = role === 'modeler' || role === 'lead';
    await signInAs(page, role);
    await expect(page.getByText(`where you are a ${role}`)).toBeVisible();
    await expect(page.getByRole('main').getByRole('link', { name: 'New batch' })).toHaveCount(
      submits ? 1 : 0,
    );
    await expect(page.getByRole('region', { name: 'Needs you' })).toHaveCount(submits ? 1 : 0);
    await expectAccessible(page);
    await openBatch(page, 'Biaryls for the topcoat');
    await expect(page.getByRole('button', { name: /^Run \d+ again/ })).toHaveCount(steers ? 1 : 0);
    await expect(page.getByRole('link', { name: 'Download bundle' })).toBeVisible();
    const bundle = await page.request.get(`${page.url()}/bundle`);
    expect(bundle.status()).toBe(200);
    const again = await page.request.post(`${page.url()}?/rerun`, {
      form: { row: '00000000-0000-0000-0000-000000000000' },
      headers: { origin: new URL(page.url()).origin, accept: 'application/json' },
    });
    // Whoever may is told that there is no such row; the others are told of their role.
    expect((await again.json()).error.message).toMatch(steers ? /no such task/ : /Your role/);
  });
}

test('a chemist is told to hand a bulk batch to a modeler', async ({ page }) => {
  await signInAs(page, 'chemist');
  const rows = Array.from({ length: 51 }, (_, n) => `CCO ethanol ${n}`);
  await readPasted(page, 'Too many', rows.join('\n'));
  await page.getByRole('button', { name: /^Compute \d+ molecule/ }).click();
  await expect(page.getByText(/at most 50 molecules at a time; this batch has 51/)).toBeVisible();
  await page.getByRole('button', { name: 'Discard' }).click();
  await page.waitForURL('**/batches/new');
});
