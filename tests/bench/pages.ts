/** How quickly pages answer in a team with 20,000 molecules, how much script they bring, and how long a preview takes. */
import { chromium, type BrowserContext } from '@playwright/test';
import config from '../../playwright.config';
import { databaseUrl, signInAs } from '../support/pages';
import setUp from '../support/product';
import { fillDatabase, MOLECULES } from './filled-database';
import { markdownTable } from './report';

/** What is aimed at. */
const TARGET = { milliseconds: 100, kilobytes: 200, previewSeconds: 15 };
const VISITS = 15;
const PREVIEWED = 5_000;

/** The section's report in Markdown. */
export async function pagesSection(): Promise<string> {
  const end = await setUp();
  const address = process.env['WINDLASS_TEST_ADDRESS']!;
  const browser = await chromium.launch(config.use!.launchOptions);
  try {
    const { largeBatch, molecule } = await fillDatabase(databaseUrl());
    const context = await browser.newContext({ baseURL: address });
    await signInAs(await context.newPage(), 'modeler');
    const batch = `/batches/${largeBatch}`;
    const pages = {
      Desk: '/desk',
      Batches: '/batches',
      'Batches, the last page': '/batches?page=7',
      'A batch of 20,000': batch,
      'its last page by name': `${batch}?sort=name&page=400`,
      'its failed rows': `${batch}?state=failed`,
      'its progress': `${batch}/progress`,
      'A molecule': `/molecules/${molecule}`,
      Queue: '/queue',
      Team: '/team',
    };
    const rows: string[][] = [];
    for (const [name, path] of Object.entries(pages)) {
      const script = path.endsWith('progress')
        ? ''
        : (await scriptKilobytes(context, path)).toFixed(0);
      rows.push([name, (await medianAnswer(context, path)).toFixed(0), script]);
    }
    const seconds = await previewSeconds(context);
    return [
      `## Pages of a team with ${MOLECULES} molecules`,
      `Median of ${VISITS} answers of the server (aim: below ${TARGET.milliseconds} ms), and the compressed script of a first visit (aim for lists: below ${TARGET.kilobytes} kB).`,
      markdownTable(['page', 'answer, ms', 'script, kB'], rows),
      `Reading ${PREVIEWED} SMILES up to their preview: ${seconds.toFixed(1)} s (aim: below ${TARGET.previewSeconds} s).`,
    ].join('\n\n');
  } finally {
    await browser.close();
    await end();
  }
}

async function medianAnswer({ request }: BrowserContext, path: string): Promise<number> {
  const times: number[] = [];
  for (let visit = 0; visit < VISITS; visit++) {
    const start = performance.now();
    const response = await request.get(path);
    await response.body();
    if (!response.ok()) throw new Error(`${path} answers ${response.status()}`);
    times.push(performance.now() - start);
  }
  return times.sort((a, b) => a - b)[Math.floor(VISITS / 2)];
}

/** What the scripts of a page take on the wire before anything is clicked. */
async function scriptKilobytes(context: BrowserContext, path: string): Promise<number> {
  const page = await context.newPage();
  const session = await context.newCDPSession(page);
  await session.send('Network.enable');
  await session.send('Network.setCacheDisabled', { cacheDisabled: true });
  const scripts = new Set<string>();
  let bytes = 0;
  session.on('Network.responseReceived', ({ requestId, response }) => {
    if (response.mimeType.includes('javascript')) scripts.add(requestId);
  });
  session.on('Network.loadingFinished', ({ requestId, encodedDataLength }) => {
    if (scripts.has(requestId)) bytes += encodedDataLength;
  });
  await page.goto(path, { waitUntil: 'load' });
  await page.locator('html[data-alive]').waitFor();
  await page.close();
  return bytes / 1000;
}

/** Distinct molecules of up to three pieces that chemists would know. */
function manySmiles(): string {
  const pieces =
    'C CC CCC CO CN C(C)C C(C)(C)C C(=O)N C(=O)O C=C C#C C(F) C(O) C(Cl) C(C#N) CS CCO CCN C(=O) c1ccccc1 c1ccncc1 c1ccsc1'.split(
      ' ',
    );
  return pieces
    .flatMap((a) => pieces.flatMap((b) => pieces.map((c) => `C${a}${b}${c}C`)))
    .slice(0, PREVIEWED)
    .join('\n');
}

async function previewSeconds({ request }: BrowserContext): Promise<number> {
  const origin = process.env['WINDLASS_TEST_ADDRESS']!;
  const start = performance.now();
  const response = await request.post('/batches/drafts?name=Many&source=paste&format=smi', {
    data: manySmiles(),
    headers: { origin, 'content-type': 'application/octet-stream' },
    timeout: 300_000,
  });
  const { draftId } = JSON.parse((await response.text()).trim().split('\n').at(-1)!);
  if (!draftId) throw new Error(`The upload failed: ${await response.text()}`);
  await request.get(`/batches/${draftId}/preview`);
  return (performance.now() - start) / 1000;
}
