/** The evidence on a molecule's page: conformers, conjugation, strain and the map of two bonds, and a batch's series. */
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { expect, test, type Page } from '@playwright/test';
import {
  expectAccessible,
  open,
  openBatch,
  openMolecule,
  signInAs,
  waitUntilDone,
} from '../support/pages';

/** The gauche conformer of butane as Windlass computed it. */
const gaucheButane = fileURLToPath(new URL('recorded/gauche-butane.sdf', import.meta.url));

const section = (page: Page, name: string | RegExp) =>
  page.locator('section').filter({ has: page.getByRole('heading', { name, level: 2 }) });

test('a chemist compares the dienes of a batch and takes the table', async ({ page }) => {
  await signInAs(page, 'chemist');
  await openBatch(page, 'Dienes for the primer');
  await page.getByRole('link', { name: 'Compare conjugation', exact: true }).click();
  const table = page.getByRole('table', { name: 'Conjugated bonds of the batch' });
  await expect(table.getByRole('row')).toHaveCount(1 + 7);
  await expect(table.getByRole('img', { name: /of isoprene/ })).toBeVisible();
  await table.getByRole('link', { name: /^Barrier/ }).click();
  await expect(table.getByRole('columnheader', { name: /^Barrier/ })).toHaveAttribute(
    'aria-sort',
    'ascending',
  );
  const barriers = await table.locator('tbody tr td:nth-child(8)').allTextContents();
  const numbers = barriers.map(Number);
  expect(numbers).toEqual([...numbers].sort((a, b) => a - b));
  await expectAccessible(page);
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('link', { name: 'Download CSV' }).click(),
  ]);
  const lines = readFileSync(await download.path(), 'utf8')
    .trim()
    .split('\r\n');
  expect(lines).toHaveLength(1 + 7);
});

test('a chemist lays conformers over one another and reads s-cis beside s-trans', async ({
  page,
}) => {
  await signInAs(page, 'chemist');
  await openMolecule(page, 'Dienes for the primer', 'isoprene');
  // Another test may have searched the same molecule with other settings; the newest comes first.
  const conformers = section(page, 'Conformers').first();
  await conformers.getByRole('button', { name: /^Show the lowest/ }).click();
  const shown = conformers.getByRole('list', { name: 'Conformers in 3-D' });
  await expect(shown.getByRole('listitem')).toHaveCount(2);
  await conformers.getByLabel('Laid over one another on').selectOption({ index: 1 });
  await expect(shown.getByRole('listitem').nth(1)).toContainText('Å off');
  await expect(conformers.getByRole('row', { name: /s-trans/ })).toHaveCount(1);

  // The ladder's levels are chosen with the keyboard too.
  const level = conformers.getByRole('checkbox', { name: /^Conformer 1, / });
  await level.press('Space');
  await expect(shown.getByRole('listitem')).toHaveCount(1);
  await level.press('ArrowUp');
  await expect(conformers.getByRole('checkbox', { name: /^Conformer 2, / })).toBeFocused();

  const [download] = await Promise.all([
    page.waitForEvent('download'),
    conformers.getByRole('link', { name: /^Download 1 conformer/ }).click(),
  ]);
  expect(readFileSync(await download.path(), 'utf8')).toContain('isoprene conformer 2');

  const conjugation = section(page, 'Conjugation');
  await expect(
    conjugation.getByRole('figure', { name: /^s-cis: .* above the lowest$/ }),
  ).toBeVisible();
  await expect(
    conjugation.getByRole('figure', { name: /^s-trans: .* above the lowest$/ }),
  ).toBeVisible();
  await expect(conjugation.locator('canvas')).toHaveCount(2);
  await expect(conjugation.getByRole('img', { name: /^Overlap along the turn/ })).toBeVisible();
  await expectAccessible(page);
});

test('a modeler maps two bonds of an uploaded geometry and reads its strain', async ({ page }) => {
  await page.setViewportSize({ width: 390, height: 844 });
  await page.emulateMedia({ colorScheme: 'dark' });
  await signInAs(page, 'modeler');
  await open(page, '/batches/new');
  await page.getByText('Upload a file').click();
  await page.getByLabel(/^.smi, .csv/).setInputFiles(gaucheButane);
  await page.getByRole('button', { name: 'Read and check' }).click();
  await page.waitForURL('**/preview');
  await page.getByRole('button', { name: 'Map of gauche butane' }).click();
  await page
    .getByRole('checkbox', { name: /^Bond between/ })
    .first()
    .press('Space');
  await expect(page.getByText('1 bond chosen, one more is needed')).toBeVisible();
  await expect(page.getByRole('button', { name: 'Keep' })).toBeDisabled();
  await page
    .getByRole('checkbox', { name: /^Bond between/ })
    .nth(1)
    .press('Space');
  await page.getByRole('button', { name: 'Keep' }).click();
  await expect(page.getByRole('button', { name: 'Map: 2 of gauche butane' })).toBeVisible();
  for (const name of ['Conformers', 'Torsion scans', /^Conjugation/]) {
    await page.getByRole('checkbox', { name }).uncheck();
  }
  await page.getByRole('checkbox', { name: 'Map of two bonds' }).check();
  await page.getByRole('checkbox', { name: /^Strain/ }).check();
  await expect(page.getByText(/^2 tasks, /)).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('button', { name: /^Compute/ }).click();
  await page.waitForURL(/batches\/[0-9a-f-]{36}$/);
  await waitUntilDone(page);
  await page.getByRole('link', { name: 'gauche butane', exact: true }).click();

  const map = section(page, /^Map of/);
  await expect(map.getByText(/minima; the lowest, A, is /)).toBeVisible();
  const surface = map.getByRole('application', { name: /^Map of two torsions/ });
  await surface.press('ArrowRight');
  await expect(
    map.getByText(/at -?\d+°, .* at -?\d+°: .* kcal\/mol above the lowest$/),
  ).toBeVisible();
  await map.getByRole('button', { name: 'Show the geometry of minimum B' }).click();
  await expect(map.getByText('Minimum B, freely relaxed')).toBeVisible();

  const strain = section(page, 'Strain of the uploaded geometry');
  // MMFF94s: gauche butane lies 0.78 kcal/mol above anti.
  await expect(strain.getByText('0.8 kcal/mol', { exact: true })).toBeVisible();
  await strain
    .getByRole('button', { name: /^Profile/ })
    .first()
    .click();
  await expect(strain.getByRole('img', { name: /^Energy along the turn/ })).toBeVisible();
  await expectAccessible(page);
});
