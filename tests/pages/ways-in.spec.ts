/** Molecules that bring their geometry, as files of both kinds; the other ways in are in batch.spec.ts. */
import { fileURLToPath } from 'node:url';
import { expect, test, type Page } from '@playwright/test';
import { compute, open, signInAs, waitUntilDone } from '../support/pages';

const fixture = (name: string) => fileURLToPath(new URL(`../fixtures/${name}`, import.meta.url));

/** Uploads a file and asks for nothing but the strain of its geometries. */
async function uploadForStrain(page: Page, file: string): Promise<void> {
  await open(page, '/batches/new');
  await page.getByText('Upload a file').click();
  await page.getByLabel(/^.smi, .csv/).setInputFiles(fixture(file));
  await page.getByRole('button', { name: 'Read and check' }).click();
  await page.waitForURL('**/preview');
  for (const name of ['Conformers', 'Torsion scans', 'Conjugation']) {
    await page.getByRole('checkbox', { name }).uncheck();
  }
  await page.getByRole('checkbox', { name: 'Strain of the uploaded geometry' }).check();
}

// MMFF94s of RDKit 2022.09.3: gauche butane lies 0.78 kcal/mol above anti butane.
test('the geometries of an SDF are measured for their strain', async ({ page }) => {
  await signInAs(page, 'chemist');
  await uploadForStrain(page, 'butanes.sdf');
  await expect(page.getByText(/^2 rows read: 2 ready/)).toBeVisible();
  await compute(page);
  await waitUntilDone(page);
  const batch = page.url();
  await page.getByRole('link', { name: 'gauche butane', exact: true }).click();
  await expect(page.getByText(/geometry is strained by 0[.]8 kcal\/mol/)).toBeVisible();
  await open(page, batch);
  await page.getByRole('link', { name: 'anti butane', exact: true }).click();
  await expect(page.getByText(/geometry is strained by 0[.]0 kcal\/mol/)).toBeVisible();
});

test('a single MOL file is one row under its own name', async ({ page }) => {
  await signInAs(page, 'chemist');
  await uploadForStrain(page, 'gauche-butane.mol');
  await expect(page.getByRole('heading', { name: 'gauche-butane.mol' })).toBeVisible();
  await expect(page.getByText(/^1 rows read: 1 ready/)).toBeVisible();
  await expect(page.getByText(/^1 task, /)).toBeVisible();
  await page.getByRole('button', { name: 'Discard' }).click();
  await page.waitForURL('**/batches/new');
});
