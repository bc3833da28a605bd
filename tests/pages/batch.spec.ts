/** From molecules to answers, as people go it in a browser. */
import { readFileSync } from 'node:fs';
import { expect, test } from '@playwright/test';
import { unzipSync } from 'fflate';
import {
  compute,
  expectAccessible,
  open,
  openBatch,
  readPasted,
  signInAs,
  waitUntilDone,
} from '../support/pages';

const molecules = [
  'C=CC=C buta-1,3-diene',
  'C=CC(=C)C isoprene',
  'nonsense broken row',
  '[Na+].[Cl-] table salt',
].join('\n');

test('a modeler pastes molecules, watches them run, reads the answer and takes the bundle', async ({
  page,
}) => {
  await signInAs(page, 'modeler');
  await open(page, '/batches/new');
  await expectAccessible(page);
  await readPasted(page, 'Pasted dienes', molecules);
  await expect(
    page.getByText('4 rows read: 2 ready, 0 with a warning, 2 with an error'),
  ).toBeVisible();
  await expect(page.getByText('"e" is no atom')).toBeVisible();
  await expect(page.getByText(/^\d+ tasks?, .*of one core/)).toBeVisible();
  await expectAccessible(page);
  await compute(page);
  await waitUntilDone(page);
  await expectAccessible(page);

  await page.getByRole('link', { name: 'buta-1,3-diene', exact: true }).click();
  // MMFF94s: gauche butadiene 2.47, barrier 6.18, planar s-cis 3.43 kcal/mol.
  await expect(
    page.getByText(
      /s-trans is preferred by 2[.]5 kcal\/mol.*6[.]2 kcal\/mol to turn; planar s-cis costs 3[.]4/,
    ),
  ).toBeVisible();
  await expect(page.locator('canvas').first()).toBeVisible();
  await expectAccessible(page);

  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('link', { name: 'Download bundle', exact: true }).click(),
  ]);
  expect(download.suggestedFilename()).toBe('buta-1_3-diene.zip');
  const files = unzipSync(readFileSync(await download.path()));
  expect(Object.keys(files)).toContain('manifest.json');
  const scan = Object.keys(files).find((path) => /scan.*[.]csv$/.test(path))!;
  expect(new TextDecoder().decode(files[scan])).toContain('planar s-cis');
});

test('a chemist chooses a bond on the drawing of an uploaded file', async ({ page }) => {
  await signInAs(page, 'chemist');
  await open(page, '/batches/new');
  await page.getByText('Upload a file').click();
  await page.getByLabel(/^.smi, .csv/).setInputFiles({
    name: 'esters.csv',
    mimeType: 'text/csv',
    buffer: Buffer.from('name,smiles\nmethyl acrylate,C=CC(=O)OC\n'),
  });
  await page.getByRole('button', { name: 'Read and check' }).click();
  await page.waitForURL('**/preview');
  await expect(page.getByRole('heading', { name: 'esters.csv' })).toBeVisible();
  await page.getByRole('button', { name: 'Bonds of methyl acrylate' }).click();
  await page
    .getByRole('checkbox', { name: /^Bond between/ })
    .first()
    .press('Space');
  await expect(page.getByText('1 bond chosen')).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Keep' }).click();
  await expect(page.getByRole('button', { name: 'Bonds: 1 of methyl acrylate' })).toBeVisible();
  await page.getByRole('checkbox', { name: 'Conformers' }).uncheck();
  await page.getByRole('checkbox', { name: 'Conjugation' }).uncheck();
  await page.locator('select[name=bonds]').selectOption('chosen');
  await expect(page.getByText(/^1 task, /)).toBeVisible();
  await compute(page);
  await waitUntilDone(page);
  await page.getByRole('link', { name: 'methyl acrylate', exact: true }).click();
  await expect(page.getByRole('heading', { name: /^Turn about/ })).toHaveCount(1);
});

test('a molecule is drawn in the editor', async ({ page }) => {
  await signInAs(page, 'chemist');
  await open(page, '/batches/new');
  await page.getByText('Draw', { exact: true }).click();
  const editor = page.getByRole('application', { name: 'Structure editor' });
  await expect(editor.locator('canvas').first()).toBeVisible();
  await page.getByRole('button', { name: 'Read and check' }).click();
  await expect(page.getByText('the drawing is still empty')).toBeVisible();
  const box = (await editor.boundingBox())!;
  // The editor's first tool draws a single bond where it is clicked.
  await page.mouse.click(box.x + box.width / 2, box.y + box.height / 2);
  await page.getByRole('button', { name: 'Read and check' }).click();
  await page.waitForURL('**/preview');
  await expect(page.getByText(/^1 rows read: 1 ready/)).toBeVisible();
});

test('a reader reads and downloads, but has no way to submit', async ({ page }) => {
  await signInAs(page, 'reader');
  await open(page, '/batches');
  await expect(page.getByRole('link', { name: 'New batch', exact: true })).toHaveCount(0);
  await expectAccessible(page);
  expect((await page.request.get('/batches/new')).status()).toBe(403);
  await page.getByRole('link', { name: 'Dienes for the primer', exact: true }).click();
  await waitUntilDone(page);
  await expect(page.getByRole('button', { name: /again|Cancel/ })).toHaveCount(0);
  await expect(page.getByRole('link', { name: 'Download bundle', exact: true })).toBeVisible();
});

test('the demo has a row that failed, and says why', async ({ page }) => {
  await signInAs(page, 'lead');
  await openBatch(page, 'Biaryls for the topcoat');
  await expect(page.getByText(/MMFF94 has no parameters for atom \d+ \(B\)/).first()).toBeVisible();
});

test('another team’s pages are not there', async ({ page, browser }) => {
  await signInAs(page, 'modeler');
  await open(page, '/batches');
  const href = await page
    .getByRole('link', { name: 'Dienes for the primer', exact: true })
    .getAttribute('href');
  await open(page, href!);
  const molecule = await page
    .getByRole('link', { name: 'isoprene', exact: true })
    .getAttribute('href');
  const stranger = await browser.newContext();
  for (const path of [href!, `${href}/bundle`, `${href}/events`, molecule!]) {
    // A visitor is sent to sign in, and learns nothing.
    const answer = await stranger.request.get(new URL(path, page.url()).href, { maxRedirects: 0 });
    expect(answer.status(), path).toBe(303);
  }
  for (const path of ['/batches/3f2b8a52-6f0e-4a53-9d3c-0c6a6b1d2e4f', '/molecules/none']) {
    expect((await page.request.get(path)).status(), path).toBe(404);
  }
  await stranger.close();
});

for (const [width, scheme] of [
  [390, 'light'],
  [390, 'dark'],
  [1280, 'dark'],
] as const) {
  test(`lists and answers fit ${width} pixels in ${scheme} colors`, async ({ page }) => {
    await page.setViewportSize({ width, height: 844 });
    await page.emulateMedia({ colorScheme: scheme });
    await signInAs(page, 'modeler');
    for (const path of ['/desk', '/batches', '/queue', '/team', '/batches/new']) {
      await open(page, path);
      await expectAccessible(page);
    }
    await openBatch(page, 'Dienes for the primer');
    await expectAccessible(page);
    await page.getByRole('link', { name: 'isoprene', exact: true }).click();
    await expect(page.getByRole('heading', { name: /^Turn about/ })).toBeVisible();
    await expectAccessible(page);
  });
}
