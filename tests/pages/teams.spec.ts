/** A team's life in a browser: asking people in, the record, links for partners, and programs with tokens. */
import { expect, test, type Page } from '@playwright/test';
import { execFileSync } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { mkdtempSync, readFileSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { linkOf, waitForLetter } from '../support/letters';
import { expectAccessible, lettersUrl, open, signInAs } from '../support/pages';

const password = 'wet lantern over nine hills';

/** Opens a team of its own for the demo's lead, so that what happens in it disturbs no other test. */
async function openOwnTeam(page: Page): Promise<string> {
  const name = `Team ${randomUUID().slice(0, 6)}`;
  await signInAs(page, 'lead');
  await open(page, '/team');
  await page.getByLabel('Name of the new team').fill(name);
  await page.getByRole('button', { name: 'Open a new team' }).click();
  await expect(page.getByRole('heading', { level: 1, name })).toBeVisible();
  return name;
}

/** The newest batch of the demo team. */
async function someBatch(page: Page): Promise<string> {
  await open(page, '/batches');
  const href = await page.locator('main table a[href^="/batches/"]').first().getAttribute('href');
  return href!.split('/').pop()!;
}

test('a lead asks somebody in, who joins; roles change, people leave, and the record says so', async ({
  page,
  browser,
}) => {
  page.on('dialog', (dialog) => void dialog.accept());
  const team = await openOwnTeam(page);
  await expectAccessible(page);
  const email = `${randomUUID().slice(0, 8)}@people.example`;
  await page.getByLabel('E-mail address').fill(email);
  await page.getByRole('button', { name: 'Invite' }).click();
  await expect(page.getByText(`An invitation is on its way to ${email}.`)).toBeVisible();
  await expect(page.getByRole('rowheader', { name: email })).toBeVisible();

  const letter = await waitForLetter(lettersUrl(), email, `Join ${team} on Windlass`);
  const { pathname, search } = new URL(linkOf(letter));
  const guest = await (await browser.newContext()).newPage();
  await open(guest, pathname + search);
  await expect(guest.getByText('asks')).toContainText(email);
  await expectAccessible(guest);
  await guest.getByLabel('Your name').fill('Bo Lind');
  await guest.getByLabel('Choose a password').fill(password);
  await guest.getByRole('button', { name: 'Open an account and join' }).click();
  await guest.waitForURL('**/desk');
  await open(guest, '/team');
  await expect(guest.getByRole('heading', { level: 1, name: team })).toBeVisible();
  await expect(guest.getByRole('button', { name: 'Invite' })).toHaveCount(0);
  await open(guest, pathname + search);
  await expect(guest.getByRole('heading', { name: 'This invitation does not work' })).toBeVisible();

  await open(page, '/team');
  await page.getByLabel('Role of Bo Lind', { exact: true }).selectOption('modeler');
  await page.getByRole('button', { name: 'Save the role of Bo Lind' }).click();
  await expect(page.getByText('The role is changed.')).toBeVisible();
  await page.getByRole('button', { name: 'Leave this team' }).click();
  await expect(page.getByText('A team needs a lead.')).toBeVisible();
  await page.getByRole('button', { name: 'Remove Bo Lind' }).click();
  await expect(page.getByText('They are no longer in the team.')).toBeVisible();

  await open(page, '/team/record');
  await expectAccessible(page);
  await expect(page.getByRole('cell', { name: 'remove member' })).toBeVisible();
  await page.getByLabel('What').selectOption('join team');
  await page.getByRole('button', { name: 'Filter' }).click();
  await expect(page.getByRole('cell', { name: 'join team' })).toHaveCount(1);
  await expect(page.getByRole('cell', { name: 'remove member' })).toHaveCount(0);
});

test('a partner takes a bundle by a link with a password, until it is ended', async ({
  page,
  browser,
}) => {
  await signInAs(page, 'modeler');
  await open(page, `/links?share=batch:${await someBatch(page)}`);
  await expectAccessible(page);
  await page.getByLabel('Password, if the link alone').fill('a long winter');
  await page.getByRole('button', { name: 'Make the link' }).click();
  const address = await page.locator('code').first().innerText();
  const row = page.getByRole('row').filter({ hasText: 'Malik Osei' }).first();
  await expect(row).toContainText('yes');

  const partner = await (await browser.newContext()).newPage();
  const { pathname } = new URL(address);
  await open(partner, pathname);
  await partner.getByLabel('Password of the link').fill('a short winter');
  await partner.getByRole('button', { name: 'Open' }).click();
  await expect(partner.getByText('This is not the password of the link.')).toBeVisible();
  expect((await partner.request.get(`${pathname}/bundle`)).status()).toBe(403);
  await partner.getByLabel('Password of the link').fill('a long winter');
  await partner.getByRole('button', { name: 'Open' }).click();
  await expect(partner.getByText('shared by the team Skerry Coatings')).toBeVisible();
  await expectAccessible(partner);
  const [download] = await Promise.all([
    partner.waitForEvent('download'),
    partner.getByRole('link', { name: 'Download bundle' }).click(),
  ]);
  const zip = readFileSync((await download.path())!);
  expect(zip.subarray(0, 4).toString('latin1')).toBe('PK\u0003\u0004');

  await open(page, '/links');
  await expect(row).toContainText('1');
  await row.getByRole('button', { name: /End the link/ }).click();
  await expect(page.getByText('The link has ended.')).toBeVisible();
  expect((await partner.goto(pathname))!.status()).toBe(404);
  await expect(partner.getByText('This link does not work')).toBeVisible();
});

test('a program submits, waits and takes the bundle as the README shows, and is told what is wrong', async ({
  page,
  request,
  baseURL,
}) => {
  await signInAs(page, 'chemist');
  await open(page, '/account/tokens');
  await page.getByLabel('Name').fill('nightly scans');
  await page.getByLabel('It may').selectOption('submit');
  await page.getByRole('button', { name: 'Make the token' }).click();
  const token = await page.locator('code', { hasText: 'windlass_' }).innerText();
  await expectAccessible(page);

  const readme = readFileSync(new URL('../../README.md', import.meta.url), 'utf8');
  const section = /## From your own programs\n([\s\S]*?)\n##+ /.exec(readme)![1];
  const commands = section
    .split('\n')
    .filter((line) => line.startsWith('    '))
    .join('\n')
    .replaceAll('http://127.0.0.1:4810', baseURL!)
    .replace('butadiene-1', randomUUID());
  const folder = mkdtempSync(join(tmpdir(), 'windlass-readme-'));
  try {
    execFileSync('bash', ['-euo', 'pipefail', '-c', commands], {
      cwd: folder,
      env: { ...process.env, TOKEN: token },
      timeout: 240_000,
    });
    const [zip] = readdirSync(folder).filter((name) => name.endsWith('.zip'));
    expect(readFileSync(join(folder, zip)).subarray(0, 2).toString()).toBe('PK');
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }

  const headers = { authorization: `Bearer ${token}` };
  const listed = await request.get('/api/v1/batches?limit=1', { headers });
  expect(listed.headers()['ratelimit']).toMatch(/^"member";r=\d+;t=60$/);
  const { items, next } = (await listed.json()) as { items: { name: string }[]; next: string };
  expect(items[0].name).toBe('Butadiene');
  const second = await request.get(`/api/v1/batches?limit=1&cursor=${next}`, { headers });
  expect(((await second.json()) as typeof items & { items: object[] }).items).toHaveLength(1);
  const known = { ...headers, 'if-none-match': listed.headers()['etag'] };
  expect((await request.get('/api/v1/batches?limit=1', { headers: known })).status()).toBe(304);

  const wrong = await request.post('/api/v1/batches', { headers, data: { name: '' } });
  expect(wrong.status()).toBe(400);
  expect(wrong.headers()['content-type']).toBe('application/problem+json');
  expect(await wrong.json()).toMatchObject({
    status: 400,
    errors: expect.arrayContaining([expect.objectContaining({ pointer: '/molecules' })]),
  });
  const nobody = await request.get('/api/v1/me');
  expect(nobody.status()).toBe(401);
  expect(nobody.headers()['www-authenticate']).toBe('Bearer');
  const nothing = await request.get('/api/v1/batches/nothing', { headers });
  expect(nothing.status()).toBe(404);
  expect((await request.get('/api/v2/batches')).headers()['content-type']).toBe(
    'application/problem+json',
  );
  // A browser's cookie is no token: a page elsewhere cannot ask in a person's name.
  expect((await page.request.get('/api/v1/me')).status()).toBe(401);

  await open(page, '/interface');
  await expectAccessible(page);
});
