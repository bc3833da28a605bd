/** What the page tests share: how to sign in, and the check of a page's accessibility. */
import { AxeBuilder } from '@axe-core/playwright';
import { expect, type BrowserContext, type Page } from '@playwright/test';

function setting(name: string): string {
  const value = process.env[name];
  if (!value)
    throw new Error(`${name} is not set; run the page tests through playwright.config.ts`);
  return value;
}

export const lettersUrl = () => setting('WINDLASS_TEST_LETTERS_URL');
export const databaseUrl = () => setting('WINDLASS_TEST_DATABASE_URL');
export const adminUrl = () => setting('WINDLASS_TEST_ADMIN_URL');
export const demoPassword = () => setting('WINDLASS_TEST_DEMO_PASSWORD');

export const demoMembers = {
  lead: 'ines.vogt@skerry.example',
  modeler: 'malik.osei@skerry.example',
  chemist: 'yuki.tanabe@skerry.example',
  reader: 'jo.marsh@tideline.example',
} as const;

/** Opens a page and waits until it is alive: what is typed before would be overwritten. */
export async function open(page: Page, path: string): Promise<void> {
  await page.goto(path);
  await page.locator('html[data-alive]').waitFor();
}

export async function signIn(page: Page, email: string, password: string): Promise<void> {
  await open(page, '/sign-in');
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL('**/desk');
}

type Cookies = Awaited<ReturnType<BrowserContext['cookies']>>;
/** Sign-ins of the demo's members, kept from test to test: the form has tests of its own. */
const signedIn = new Map<string, { readonly at: number; readonly cookies: Cookies }>();
/** Well within the time for which dangerous acts take a sign-in as fresh. */
const KEPT_MS = 4 * 60_000;

/** Opens the desk as a member of the demo, in a sign-in that may be shared with other tests of the file. */
export async function signInAs(page: Page, role: keyof typeof demoMembers): Promise<void> {
  const kept = signedIn.get(role);
  if (kept && Date.now() - kept.at < KEPT_MS) {
    await page.context().addCookies(kept.cookies);
    await open(page, '/desk');
    if (new URL(page.url()).pathname === '/desk') return;
  }
  await signIn(page, demoMembers[role], demoPassword());
  signedIn.set(role, { at: Date.now(), cookies: await page.context().cookies() });
}

/** Pastes molecules, one on each line, and has them read into a preview. */
export async function readPasted(page: Page, name: string, text: string): Promise<void> {
  await open(page, '/batches/new');
  await page.getByLabel('Name of the batch').fill(name);
  await page.getByLabel(/^One SMILES on each line/).fill(text);
  await page.getByRole('button', { name: 'Read and check' }).click();
  await page.waitForURL('**/preview');
}

/** From the preview to the batch: everything that is chosen there is queued. */
export async function compute(page: Page): Promise<void> {
  await page.getByRole('button', { name: /^Compute \d+ molecule/ }).click();
  await page.waitForURL(/batches\/[0-9a-f-]{36}$/);
}

/** Waits on the page of a batch until all of it has ended. */
export async function waitUntilDone(page: Page): Promise<void> {
  await expect(page.getByRole('progressbar')).toHaveAttribute('aria-valuenow', '100', {
    timeout: 240_000,
  });
}

/** Opens a batch by its name, and waits until all of it has ended. */
export async function openBatch(page: Page, name: string): Promise<void> {
  await open(page, '/batches');
  await page.getByRole('link', { name, exact: true }).click();
  await waitUntilDone(page);
}

/** Opens a molecule of a batch once all of the batch has ended. */
export async function openMolecule(page: Page, batch: string, molecule: string): Promise<void> {
  await openBatch(page, batch);
  await page.getByRole('link', { name: molecule, exact: true }).click();
  await page.waitForURL(/molecules/);
}

/** Checks the page as it stands against WCAG 2.2 A and AA, and that nothing makes it scroll sideways. */
export async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
    .analyze();
  expect(
    violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`),
  ).toEqual([]);
  const overflow = await page.evaluate(
    () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
  );
  expect(overflow, 'pixels that the page is wider than the window').toBe(0);
}
