/**
 * `npm run pictures`: every page as people see it, on a desk and on a phone, in light and in dark colors, kept in
 * tests/pages/pictures to be looked at after a change of design. Names after the command choose pages.
 */
import { mkdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { chromium, type Page } from '@playwright/test';
import config from '../../playwright.config';
import { open, openBatch, openMolecule, signInAs, type demoMembers } from '../support/pages';
import setUp from '../support/product';

const FOLDER = fileURLToPath(new URL('./pictures/', import.meta.url));
/** Small enough to keep, good enough to judge a page by. */
const QUALITY = 60;
/** What lies further down is seen on the page's own shorter neighbors. */
const TALLEST = 5_000;

const windows = [
  { name: 'desktop', viewport: { width: 1280, height: 800 } },
  { name: 'phone', viewport: { width: 390, height: 844 } },
] as const;
const schemes = ['light', 'dark'] as const;

type Who = keyof typeof demoMembers | null;
interface Pictured {
  readonly who: Who;
  readonly go: (page: Page) => Promise<unknown>;
}

const at =
  (path: string) =>
  (page: Page): Promise<void> =>
    open(page, path);

async function lookAt(page: Page, batch: string, molecule: string): Promise<void> {
  await openMolecule(page, batch, molecule);
  await page.locator('canvas').first().waitFor();
}

// Pages that show a secret are left out: pictures are kept.
const pages: Record<string, Pictured> = {
  front: { who: null, go: at('/') },
  'sign-in': { who: null, go: at('/sign-in') },
  'sign-up': { who: null, go: at('/sign-up') },
  interface: { who: null, go: at('/interface') },
  desk: { who: 'modeler', go: at('/desk') },
  batches: { who: 'modeler', go: at('/batches') },
  'new-batch': { who: 'chemist', go: at('/batches/new') },
  batch: { who: 'modeler', go: (page) => openBatch(page, 'Biaryls for the topcoat') },
  series: {
    who: 'chemist',
    async go(page) {
      await openBatch(page, 'Dienes for the primer');
      await page.getByRole('link', { name: 'Compare conjugation', exact: true }).click();
      await page.getByRole('table', { name: 'Conjugated bonds of the batch' }).waitFor();
    },
  },
  diene: {
    who: 'chemist',
    go: (page) => lookAt(page, 'Dienes for the primer', 'isoprene'),
  },
  strain: {
    who: 'modeler',
    go: (page) => lookAt(page, 'Benzanilide, as packed', 'benzanilide as packed'),
  },
  report: {
    who: 'chemist',
    async go(page) {
      await lookAt(page, 'Dienes for the primer', 'isoprene');
      await page.getByRole('link', { name: 'Report', exact: true }).click();
      await page.waitForURL(/report/);
    },
  },
  compare: {
    who: 'chemist',
    async go(page) {
      await openBatch(page, 'Biaryls for the topcoat');
      await page.getByRole('link', { name: 'Compare biphenyl', exact: true }).click();
      await page.waitForURL(/compare/);
    },
  },
  search: { who: 'chemist', go: at('/search?structure=c1ccccc1') },
  notes: { who: 'chemist', go: at('/notes') },
  queue: { who: 'modeler', go: at('/queue') },
  team: { who: 'lead', go: at('/team') },
  record: { who: 'lead', go: at('/team/record') },
  links: { who: 'modeler', go: at('/links') },
  account: { who: 'modeler', go: at('/account') },
  tokens: { who: 'modeler', go: at('/account/tokens') },
  limits: { who: 'lead', go: at('/team/limits') },
  'signing-in': { who: 'lead', go: at('/team/signing-in') },
  webhooks: { who: 'lead', go: at('/team/webhooks') },
  'team-end': { who: 'lead', go: at('/team/end') },
  operator: { who: 'lead', go: at('/operator') },
};

/** A window that shows all of a page at once: plots and 3-D views come when they are seen, and go when they are not. */
async function sizeOf(page: Page, width: number) {
  const height = await page.evaluate(() => document.documentElement.scrollHeight);
  return { width, height: Math.min(height, TALLEST) };
}

/** Waits until the page has been drawn anew, twice: colors of a scheme come one frame late. */
const painted = (page: Page) =>
  page.evaluate(
    () => new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(resolve))),
  );

const chosen = process.argv.slice(2);
const unknown = chosen.filter((name) => !(name in pages));
if (unknown.length > 0) {
  console.error(`No page ${unknown.join(', ')}; there are: ${Object.keys(pages).join(', ')}.`);
  process.exit(2);
}

mkdirSync(FOLDER, { recursive: true });
const end = await setUp();
const browser = await chromium.launch(config.use!.launchOptions);
try {
  for (const { name: device, viewport } of windows) {
    for (const name of chosen.length > 0 ? chosen : Object.keys(pages)) {
      const { who, go } = pages[name];
      const context = await browser.newContext({
        baseURL: process.env['WINDLASS_TEST_ADDRESS']!,
        viewport,
        reducedMotion: 'reduce',
      });
      const page = await context.newPage();
      if (who) await signInAs(page, who);
      await go(page);
      for (const scheme of schemes) {
        await page.emulateMedia({ colorScheme: scheme, reducedMotion: 'reduce' });
        await page.setViewportSize(await sizeOf(page, viewport.width));
        await page.waitForFunction(() => !/Loading (the|geom)/.test(document.body.innerText));
        await painted(page);
        await page.screenshot({
          path: `${FOLDER}${name}-${device}-${scheme}.jpg`,
          type: 'jpeg',
          quality: QUALITY,
        });
      }
      console.log(`${name}, ${device}`);
      await context.close();
    }
  }
} finally {
  await browser.close();
  await end();
}
