/** How soon a molecule's page is painted, and how smoothly a large molecule turns with the dial. */
import { chromium, type BrowserContext, type CDPSession, type Page } from '@playwright/test';
import config from '../../playwright.config';
import { compute, open, readPasted, signInAs, waitUntilDone } from '../support/pages';
import setUp from '../support/product';
import { verapamil } from './molecules';
import { markdownTable } from './report';

const turned = [
  { name: 'butadiene', smiles: 'C=CC=C', atoms: 10 },
  { ...verapamil, atoms: 71 },
] as const;
const VISITS = 7;
const SECONDS = 5;

/** The section's report in Markdown. */
export async function turningSection(): Promise<string> {
  const end = await setUp();
  const browser = await chromium.launch(config.use!.launchOptions);
  try {
    const context = await browser.newContext({
      baseURL: process.env['WINDLASS_TEST_ADDRESS']!,
      viewport: { width: 1280, height: 1000 },
    });
    const page = await context.newPage();
    await signInAs(page, 'modeler');
    const paints: string[][] = [];
    const turns: string[][] = [];
    for (const { atoms, ...molecule } of turned) {
      const address = await scanOneBond(page, molecule);
      paints.push([`${atoms} atoms`, ...(await medianPaints(context, address))]);
      turns.push([`${atoms} atoms`, ...(await turnRound(context, address))]);
    }
    return [
      '## A molecule’s page, in software rendering',
      `Median of ${VISITS} visits with an empty cache, milliseconds from the request on.`,
      markdownTable(['molecule', 'first paint', 'largest paint', 'dial can be turned'], paints),
      `The dial dragged round for ${SECONDS} s with the 3-D view and the profile turning along (aim: 16.7 ms a frame).`,
      markdownTable(
        ['molecule', 'frames a second', 'slowest of 20 frames, ms', 'main thread a frame, ms'],
        turns,
      ),
    ].join('\n\n');
  } finally {
    await browser.close();
    await end();
  }
}

/** Has one bond of a molecule scanned, and returns the address of its page. */
async function scanOneBond(
  page: Page,
  { name, smiles }: { readonly name: string; readonly smiles: string },
): Promise<string> {
  await readPasted(page, `Bench of ${name}`, `${smiles} ${name}`);
  for (const kind of ['Conformers', /^Conjugation/]) {
    await page.getByRole('checkbox', { name: kind }).uncheck();
  }
  await page.getByRole('button', { name: `Bonds of ${name}` }).click();
  await page
    .getByRole('checkbox', { name: /^Bond between/ })
    .first()
    .press('Space');
  await page.getByRole('button', { name: 'Keep' }).click();
  await page.locator('select[name=bonds]').selectOption('chosen');
  await compute(page);
  await waitUntilDone(page);
  await page.getByRole('link', { name, exact: true }).click();
  await page.waitForURL(/molecules/);
  return page.url();
}

/** Medians of first paint, largest paint, and the dial's being there, milliseconds. */
async function medianPaints(context: BrowserContext, address: string): Promise<string[]> {
  const visits: number[][] = [];
  for (let visit = 0; visit < VISITS; visit++) {
    const page = await context.newPage();
    const session = await context.newCDPSession(page);
    await session.send('Network.setCacheDisabled', { cacheDisabled: true });
    await page.goto(address);
    await page.locator('html[data-alive]').waitFor();
    await page.getByTestId('profile-cursor').waitFor();
    visits.push(
      await page.evaluate(async () => {
        const largest = await new Promise<number>((resolve) =>
          new PerformanceObserver((list) => resolve(list.getEntries().at(-1)!.startTime)).observe({
            type: 'largest-contentful-paint',
            buffered: true,
          }),
        );
        const first = performance.getEntriesByName('first-contentful-paint')[0].startTime;
        return [first, largest, performance.now()];
      }),
    );
    await page.close();
  }
  return visits[0].map((_, n) => {
    const times = visits.map((visit) => visit[n]).sort((a, b) => a - b);
    return times[Math.floor(VISITS / 2)].toFixed(0);
  });
}

/** Drags the dial round and round; how often and how evenly frames came, and what each cost the main thread. */
async function turnRound(context: BrowserContext, address: string): Promise<string[]> {
  const page = await context.newPage();
  await open(page, address);
  const dial = page.getByRole('slider', { name: /^Torsion / });
  await dial.scrollIntoViewIfNeeded();
  await page.locator('canvas').first().waitFor();
  const box = (await dial.boundingBox())!;
  const [x, y] = [box.x + box.width / 2, box.y + box.height / 2];
  const moveTo = (turn: number) =>
    page.mouse.move(
      x + 0.29 * box.width * Math.sin(2 * Math.PI * turn),
      y - 0.29 * box.width * Math.cos(2 * Math.PI * turn),
    );
  const session = await context.newCDPSession(page);
  await session.send('Performance.enable');
  await moveTo(0.5);
  await page.mouse.down();
  await page.evaluate(RECORD_FRAMES);
  const before = await mainThreadSeconds(session);
  const end = performance.now() + 1000 * SECONDS;
  for (let turn = 0.5; performance.now() < end; turn += 1 / 240) await moveTo(turn);
  const busy = (await mainThreadSeconds(session)) - before;
  const frames = await page.evaluate(() => (globalThis as unknown as { frames: number[] }).frames);
  await page.mouse.up();
  await page.close();
  const gaps = frames.slice(1).map((at, n) => at - frames[n]);
  const sorted = gaps.toSorted((a, b) => a - b);
  return [
    ((1000 * gaps.length) / (frames.at(-1)! - frames[0])).toFixed(0),
    sorted[Math.floor(0.95 * sorted.length)].toFixed(1),
    ((1000 * busy) / gaps.length).toFixed(1),
  ];
}

/** Notes in the page when each frame begins; as text, since a function from here would bring its loader's marks along. */
const RECORD_FRAMES = `{
  globalThis.frames = [];
  const next = (at) => {
    globalThis.frames.push(at);
    requestAnimationFrame(next);
  };
  requestAnimationFrame(next);
}`;

async function mainThreadSeconds(session: CDPSession): Promise<number> {
  const { metrics } = await session.send('Performance.getMetrics');
  return metrics.find(({ name }) => name === 'TaskDuration')!.value;
}
