/** Finding molecules, writing about them, comparing their profiles and printing their answers, in a browser. */
import { readFileSync } from 'node:fs';
import { expect, test, type Page } from '@playwright/test';
import { expectAccessible, open, openBatch, signInAs } from '../support/pages';

/** Finds a molecule of the demo when its batch is computed; returns its path. */
async function findMolecule(page: Page, name: string): Promise<string> {
  await openBatch(page, 'Dienes for the primer');
  await open(page, `/search?text=${name}&in=name`);
  await page.getByRole('link', { name, exact: true }).click();
  await expect(page.getByRole('heading', { name, level: 1 })).toBeVisible();
  return new URL(page.url()).pathname;
}

test('a reader finds molecules by name, by SMILES and by a drawn structure', async ({ page }) => {
  await signInAs(page, 'reader');
  await open(page, '/batches');
  await page.getByRole('link', { name: 'Search', exact: true }).click();
  await expectAccessible(page);
  await page.getByLabel('Name or SMILES').fill('isopr');
  await page.getByRole('button', { name: 'Search' }).click();
  const rows = page.getByRole('region', { name: 'Found molecules, the newest first' });
  await expect(rows.getByRole('rowheader')).toHaveText(['isoprene']);

  await page.getByLabel('Name or SMILES').fill('C=C(C=C)C');
  await page.getByLabel('Look in').selectOption('exact');
  await page.getByRole('button', { name: 'Search' }).click();
  await page.waitForURL(/in=exact/);
  await expect(rows.getByRole('rowheader')).toHaveText(['isoprene']);

  await open(page, '/search?structure=c1ccsc1');
  await expect(rows.getByRole('rowheader')).toHaveText(["2,2'-bithiophene"]);
  await expectAccessible(page);

  await open(page, '/search?structure=C1CC');
  await expect(page.getByText(/^This is no SMILES or SMARTS/)).toBeVisible();
  await expectAccessible(page);

  await open(page, '/search');
  await page.getByRole('button', { name: 'Draw' }).click();
  const editor = page.getByRole('application', { name: 'Editor of the structure to look for' });
  await expect(editor.locator('canvas').first()).toBeVisible();
  const box = (await editor.boundingBox())!;
  // The editor's first tool draws a single bond where it is clicked.
  await page.mouse.click(box.x + box.width / 2, box.y + box.height / 2);
  await page.getByRole('button', { name: 'Use the drawing' }).click();
  await expect(page.getByLabel('Contains the structure')).toHaveValue('CC');
  await page.getByRole('button', { name: 'Search' }).click();
  await expect(rows.getByRole('rowheader').filter({ hasText: 'isoprene' })).toHaveCount(1);
  await expect(rows.getByRole('rowheader').filter({ hasText: 'buta-1,3-diene' })).not.toHaveCount(
    0,
  );
});

test('a chemist writes to the lead, who sees it at once, answers and resolves', async ({
  page,
  browser,
}) => {
  await signInAs(page, 'chemist');
  const path = await findMolecule(page, 'isoprene');
  const other = await browser.newContext();
  const lead = await other.newPage();
  await signInAs(lead, 'lead');
  await open(lead, `${path}/notes`);

  const dialogs: string[] = [];
  lead.on('dialog', (dialog) => {
    dialogs.push(dialog.message());
    void dialog.dismiss();
  });
  const box = page.getByLabel('New note');
  await box.pressSequentially('<img src=x onerror=alert(1)> is **this** right, @in');
  await expect(page.getByRole('option', { name: 'Ines Vogt' })).toBeVisible();
  await box.press('Enter');
  await expect(box).toHaveValue('<img src=x onerror=alert(1)> is **this** right, @Ines Vogt ');
  await page.getByLabel('About', { exact: true }).selectOption({ label: 'Bond C2–C4' });
  await page.getByRole('button', { name: 'Write the note' }).click();
  const thread = page.getByRole('article', { name: 'Note by Yuki Tanabe' });
  await expect(thread.locator('strong')).toHaveText('this');
  await expectAccessible(page);

  // No reload: the news come by themselves.
  const seen = lead.getByRole('article', { name: 'Note by Yuki Tanabe' });
  await expect(seen.getByText('@Ines Vogt')).toBeVisible();
  await expect(seen.getByText('C2–C4')).toBeVisible();
  await expect(seen.locator('img')).toHaveCount(0);
  await seen.getByRole('button', { name: 'Reply to Yuki Tanabe' }).click();
  await lead.getByLabel('Reply to Yuki Tanabe').fill('It is.');
  await lead.getByRole('button', { name: 'Reply', exact: true }).click();
  await expect(thread.getByText('It is.')).toBeVisible();

  await open(lead, '/notes');
  await expect(lead.getByRole('link', { name: 'isoprene', exact: true })).toBeVisible();
  await expectAccessible(lead);
  await lead.getByRole('link', { name: 'isoprene', exact: true }).click();
  await lead.getByRole('button', { name: 'Resolve' }).click();
  await expect(page.getByText('1 resolved thread')).toBeVisible();
  await expect(page.getByText('Nothing is open here')).toBeVisible();
  expect(dialogs).toEqual([]);
  await other.close();
});

test('profiles are compared, sorted, downloaded and shared by their address', async ({ page }) => {
  await signInAs(page, 'modeler');
  await findMolecule(page, 'isoprene');
  await page.getByRole('link', { name: 'Compare C2–C4' }).click();
  await page.waitForURL('**/compare?p=*');
  await page.getByLabel('Name of the molecule').fill('chloroprene');
  await page.getByRole('button', { name: 'Find' }).click();
  await page.getByRole('link', { name: /^Add .* of chloroprene/ }).click();
  const table = page.getByRole('region', { name: 'Differences between the profiles' });
  await expect(table.getByRole('rowheader')).toHaveCount(2);
  await expectAccessible(page);

  await table.getByRole('button', { name: /^Profile/ }).click();
  await expect(table.getByRole('rowheader').first()).toContainText('chloroprene');
  await table.getByRole('checkbox', { name: /chloroprene/ }).check();
  await page.getByLabel('Energies in').selectOption('kJ/mol');
  await expect(page).toHaveURL(/[.]m.*unit=kJ/);
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('link', { name: 'Download table' }).click(),
  ]);
  const lines = readFileSync(await download.path(), 'utf8')
    .trim()
    .split('\r\n');
  expect(lines).toHaveLength(3);
  expect(lines[0]).toContain('highest_barrier_kj_per_mol');
  expect(lines[2]).toMatch(/^chloroprene,.*,true,0,/);

  const shared = page.url();
  await page.context().clearCookies();
  await signInAs(page, 'reader');
  await open(page, shared);
  await expect(table.getByRole('checkbox', { name: /chloroprene/ })).toBeChecked();
  await page.setViewportSize({ width: 390, height: 844 });
  await page.emulateMedia({ colorScheme: 'dark' });
  await expectAccessible(page);
});

test('a report fits A4 and Letter paper', async ({ page }) => {
  await signInAs(page, 'reader');
  await findMolecule(page, 'isoprene');
  await page.getByRole('link', { name: 'Report', exact: true }).click();
  await expect(page.getByRole('heading', { name: 'Methods' })).toBeVisible();
  for (const text of ['Turn about C2–C4', 'Conformers', 'Literature', 'Cautions', 'seed 1']) {
    await expect(page.getByText(text).first()).toBeVisible();
  }
  await expectAccessible(page);
  await page.setViewportSize({ width: 390, height: 844 });
  await expectAccessible(page);

  // Points; the margins of 15 mm on either side are taken off for the room there is, in CSS pixels.
  for (const [format, width, height, room] of [
    ['A4', 595, 842, 680],
    ['Letter', 612, 792, 702],
  ] as const) {
    await page.setViewportSize({ width: room, height: 900 });
    await page.emulateMedia({ media: 'print' });
    await expect(page.getByRole('button', { name: 'Print or save as PDF' })).toBeHidden();
    await expect(page.getByRole('navigation')).toBeHidden();
    const clipped = await page
      .locator('.report *')
      .evaluateAll(
        (elements, right) =>
          elements.filter((element) => element.getBoundingClientRect().right > right + 1).length,
        room,
      );
    expect(clipped, `elements that ${format} paper would clip`).toBe(0);
    const pdf = (await page.pdf({ format, preferCSSPageSize: false, tagged: true })).toString(
      'latin1',
    );
    const boxes = [...pdf.matchAll(/MediaBox \[0 0 ([\d.]+) ([\d.]+)\]/g)];
    expect(boxes.length).toBeGreaterThanOrEqual(2);
    expect(boxes.length).toBeLessThanOrEqual(4);
    for (const [, w, h] of boxes) {
      expect(Math.abs(Number(w) - width)).toBeLessThan(1.5);
      expect(Math.abs(Number(h) - height)).toBeLessThan(1.5);
    }
    // A tagged PDF names its headings and tables, so that readers aloud can follow it.
    expect(pdf).toContain('/MarkInfo');
  }
});
