/** Reading a torsion profile: the dial, what turns with it, and how results are read. */
import { readFileSync } from 'node:fs';
import { expect, test, type Locator, type Page } from '@playwright/test';
import { expectAccessible, openMolecule, signInAs } from '../support/pages';

/** Opens the demo's butadiene, whose batch is computed when the product starts for the first time. */
async function openButadiene(page: Page): Promise<Locator> {
  await openMolecule(page, 'Dienes for the primer', 'buta-1,3-diene');
  const dial = page.getByRole('slider', { name: /^Torsion / });
  await dial.scrollIntoViewIfNeeded();
  await expect(page.getByTestId('profile-cursor')).toBeVisible();
  return dial;
}

const transformOf = (locator: Locator) => locator.getAttribute('transform');

/** The point of the dial's ring at an angle, in pixels of the page. */
async function ringPoint(dial: Locator, angle: number): Promise<[number, number]> {
  const box = (await dial.boundingBox())!;
  const radius = 0.29 * box.width;
  const radians = (angle * Math.PI) / 180;
  return [
    box.x + box.width / 2 + radius * Math.sin(radians),
    box.y + box.height / 2 - radius * Math.cos(radians),
  ];
}

test('a chemist turns the dial by keys and by hand, and everything turns with it', async ({
  page,
}) => {
  await signInAs(page, 'chemist');
  const dial = await openButadiene(page);
  const cursor = page.getByTestId('profile-cursor');
  // The lowest form comes first.
  await expect(dial).toHaveAttribute('aria-valuetext', '180 degrees, planar s-trans, 0.0 kcal/mol');
  const before = await transformOf(cursor);

  await dial.focus();
  await page.keyboard.press('ArrowRight');
  await expect(dial).toHaveAttribute('aria-valuetext', /^-165 degrees, planar s-trans, 0[.]\d/);
  await page.keyboard.press('ArrowLeft');
  await page.keyboard.press('ArrowLeft');
  await expect(dial).toHaveAttribute('aria-valuenow', '165');
  // MMFF94s: the barrier lies 6.18 kcal/mol up, near 100 degrees; Home goes there.
  await page.keyboard.press('Home');
  await expect(dial).toHaveAttribute('aria-valuetext', /^1\d\d degrees, .*, 6[.]2 kcal\/mol$/);
  await expect.poll(() => transformOf(cursor)).not.toBe(before);
  await expect(page.getByLabel('Torsion angle in degrees')).toHaveValue(/^1\d\d$/);

  await page.mouse.move(...(await ringPoint(dial, 120)));
  await page.mouse.down();
  await page.mouse.move(...(await ringPoint(dial, 30)), { steps: 6 });
  await page.mouse.up();
  await expect(dial).toHaveAttribute('aria-valuenow', /^(29|30|31)$/);
  await expect(dial).toHaveAttribute('aria-valuetext', /gauche/);

  await page.getByRole('button', { name: /^Turn to planar s-cis/ }).click();
  await expect(dial).toHaveAttribute('aria-valuetext', '0 degrees, planar s-cis, 3.4 kcal/mol');
  await expectAccessible(page);
});

test('temperature and unit change every number at once, and the unit is remembered', async ({
  page,
}) => {
  await signInAs(page, 'chemist');
  await openButadiene(page);
  const sentence = page.getByText(/planar s-trans .* is preferred over gauche/).first();
  await expect(sentence).toContainText('by ΔE 2.5 kcal/mol, ΔG');
  const share = async () => /; (\d+) % by ΔE at/.exec(await sentence.innerText())?.[1];
  const cold = Number(await share());
  await page.getByLabel('Temperature in kelvin').fill('500');
  await page.getByLabel('Temperature in kelvin').press('Tab');
  await expect(sentence).toContainText('at 227 °C');
  expect(Number(await share())).toBeLessThan(cold);

  await page.getByRole('button', { name: 'kJ/mol', exact: true }).click();
  await expect(sentence).toContainText(/by ΔE [\d.]+ kJ\/mol, ΔG/);
  await expect(page.getByRole('button', { name: 'kJ/mol', exact: true })).toHaveAttribute(
    'aria-pressed',
    'true',
  );
  const answered = page.waitForResponse((response) => response.url().endsWith('/reading'));
  await page.getByRole('button', { name: 'kcal/mol', exact: true }).click();
  expect((await answered).status()).toBe(204);
  const answeredAgain = page.waitForResponse((response) => response.url().endsWith('/reading'));
  await page.getByRole('button', { name: 'kJ/mol', exact: true }).click();
  expect((await answeredAgain).status()).toBe(204);
  await page.reload();
  await page.locator('html[data-alive]').waitFor();
  await expect(sentence).toContainText(/by ΔE [\d.]+ kJ\/mol, ΔG/);
  await page.getByRole('button', { name: 'kcal/mol', exact: true }).click();
});

test('the dial is saved as a picture that stands alone', async ({ page }) => {
  await signInAs(page, 'modeler');
  await page.emulateMedia({ colorScheme: 'dark' });
  await openButadiene(page);
  const menu = page.locator('details', { hasText: 'Energy dial of' });
  await menu.locator('summary').click();
  const [svg] = await Promise.all([
    page.waitForEvent('download'),
    menu.getByRole('button', { name: /^SVG/ }).click(),
  ]);
  expect(svg.suggestedFilename()).toMatch(/^Energy_dial_of_.*[.]svg$/);
  const text = readFileSync(await svg.path(), 'utf8');
  const fault = await page.evaluate((xml) => {
    const parsed = new DOMParser().parseFromString(xml, 'image/svg+xml');
    return parsed.querySelector('parsererror')?.textContent ?? parsed.documentElement.nodeName;
  }, text);
  expect(fault).toBe('svg');
  // Nothing in it asks the page for a color, a class or a font, and paper is white in dark colors, too.
  expect(text).not.toMatch(/var\(|class=|data-page-only/);
  expect(text).toContain('#ffffff');
  expect(text).toContain('rgb(22, 36, 43)');
  expect(text).toMatch(/@font-face[^}]*data:font\/woff2|@font-face[^}]*data:application/);
  expect(text).toContain('planar s-trans');

  const [png] = await Promise.all([
    page.waitForEvent('download'),
    menu.getByRole('button', { name: /^PNG/ }).click(),
  ]);
  expect(
    readFileSync(await png.path())
      .subarray(1, 4)
      .toString(),
  ).toBe('PNG');
});

test('geometries of a scan come once, and only to who may see them', async ({ page, browser }) => {
  await signInAs(page, 'reader');
  const packed = page.waitForResponse((response) => response.url().endsWith('/packed'));
  await openButadiene(page);
  const answer = await packed;
  expect(answer.headers()['cache-control']).toContain('immutable');
  const etag = answer.headers()['etag'];
  const again = await page.request.get(answer.url(), { headers: { 'if-none-match': etag } });
  expect(again.status()).toBe(304);
  const stranger = await browser.newContext();
  expect((await stranger.request.get(answer.url(), { maxRedirects: 0 })).status()).toBe(303);
  await stranger.close();
});

for (const scheme of ['light', 'dark'] as const) {
  test(`the dial fits a phone in ${scheme} colors`, async ({ browser }) => {
    const context = await browser.newContext({
      viewport: { width: 390, height: 844 },
      colorScheme: scheme,
      reducedMotion: 'reduce',
      hasTouch: true,
    });
    const page = await context.newPage();
    await signInAs(page, 'reader');
    const dial = await openButadiene(page);
    await page.touchscreen.tap(...(await ringPoint(dial, 90)));
    await expect(dial).toHaveAttribute('aria-valuenow', /^(89|90|91)$/);
    await expectAccessible(page);
    await context.close();
  });
}
