/** The way into the product, as a person goes it in a browser. */
import { expect, test, type Page } from '@playwright/test';
import { randomUUID } from 'node:crypto';
import { linkOf, waitForLetter } from '../support/letters';
import { expectAccessible, lettersUrl, open, signIn, signInAs } from '../support/pages';

const password = 'wet lantern over nine hills';
const other = 'green anvil beside a quiet road';
const newAddress = () => `${randomUUID().slice(0, 8)}@people.example`;

/** The part of a letter's link that belongs to the product, whatever its address. */
async function followLetter(page: Page, email: string, subject: string): Promise<void> {
  const { pathname, search } = new URL(linkOf(await waitForLetter(lettersUrl(), email, subject)));
  await open(page, pathname + search);
}

async function signUp(page: Page, email: string): Promise<void> {
  await open(page, '/sign-up');
  await page.getByLabel('Your name').fill('Ada Falk');
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign up' }).click();
  await expect(page.getByText(`A letter is on its way to ${email}`)).toBeVisible();
}

async function signUpAndConfirm(page: Page): Promise<string> {
  const email = newAddress();
  await signUp(page, email);
  await followLetter(page, email, 'Confirm your address');
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Confirm and sign in' }).click();
  await page.waitForURL('**/desk');
  return email;
}

async function signOut(page: Page): Promise<void> {
  await page.locator('summary', { hasText: 'Account:' }).click();
  await page.getByRole('button', { name: 'Sign out' }).click();
  await expect(page.getByRole('link', { name: 'Sign in' }).first()).toBeVisible();
}

test('a person signs up, confirms by the letter, signs out and in again', async ({ page }) => {
  const email = newAddress();
  await signUp(page, email);
  await expectAccessible(page);

  await open(page, '/sign-in');
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByText('This address is not confirmed yet')).toBeVisible();
  await expectAccessible(page);

  await open(page, '/development/letters');
  await page.getByRole('link', { name: email }).first().click();
  await expectAccessible(page);
  await page.getByRole('link', { name: /\/confirm[?]token=/ }).click();
  await expect(page.getByRole('heading', { name: 'Confirm your address' })).toBeVisible();
  await expectAccessible(page);
  await page.getByLabel('Password').fill('not what was chosen');
  await page.getByRole('button', { name: 'Confirm and sign in' }).click();
  await expect(page.getByText('This is not the password you chose.')).toBeVisible();
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Confirm and sign in' }).click();
  await page.waitForURL('**/desk');
  await expect(page.getByText('Ada Falk’s team').first()).toBeVisible();

  await signOut(page);
  await open(page, '/account');
  await expect(page).toHaveURL(/\/sign-in[?]next=%2Faccount/);
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL('**/account');
});

test('a used letter says so', async ({ page }) => {
  const email = await signUpAndConfirm(page);
  await followLetter(page, email, 'Confirm your address');
  await expect(page.getByRole('heading', { name: 'This link does not work' })).toBeVisible();
  await expectAccessible(page);
});

test('a person chooses a new password by letter, and the old one is refused', async ({ page }) => {
  const email = await signUpAndConfirm(page);
  await signOut(page);
  await open(page, '/forgot');
  await expectAccessible(page);
  await page.getByLabel('E-mail address').fill(email);
  await page.getByRole('button', { name: 'Send the letter' }).click();
  await expect(page.getByText(`If ${email} has an account`)).toBeVisible();
  await expectAccessible(page);

  await followLetter(page, email, 'Choose a new password');
  await expectAccessible(page);
  await page.getByLabel('New password').fill('password1234');
  await page.getByRole('button', { name: 'Set the password' }).click();
  await expect(page.getByText('among the first passwords anyone would try')).toBeVisible();
  await page.getByLabel('New password').fill(other);
  await page.getByRole('button', { name: 'Set the password' }).click();
  await expect(page.getByText('Your new password is set')).toBeVisible();

  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByText('do not belong together')).toBeVisible();
  await expectAccessible(page);
  await signIn(page, email, other);
});

test('nothing on the pages tells which addresses have accounts', async ({ page }) => {
  const known = await signUpAndConfirm(page);
  await signOut(page);
  const answerOf = async (path: string, email: string) => {
    await open(page, path);
    await page.getByLabel('E-mail address').fill(email);
    if (path !== '/forgot') await page.getByLabel('Password').fill(other);
    if (path === '/sign-up') await page.getByLabel('Your name').fill('Somebody');
    await page.locator('main form button').last().click();
    const answer = page.locator('main').getByRole(path === '/sign-in' ? 'alert' : 'status');
    return (await answer.innerText()).replace(email, 'ADDRESS');
  };
  for (const path of ['/forgot', '/sign-up', '/sign-in']) {
    expect(await answerOf(path, known)).toBe(await answerOf(path, newAddress()));
  }
});

test('a person ends a sign-in elsewhere, which ends at once', async ({ page, browser }) => {
  const email = await signUpAndConfirm(page);
  const elsewhere = await browser.newContext();
  const otherPage = await elsewhere.newPage();
  await signIn(otherPage, email, password);

  await open(page, '/account');
  await expectAccessible(page);
  await expect(page.getByRole('row').filter({ hasText: 'This one' })).toHaveCount(1);
  await page.getByRole('button', { name: /^End .* on/ }).click();
  await expect(page.getByRole('button', { name: /^End .* on/ })).toHaveCount(0);

  await otherPage.goto('/account');
  await expect(otherPage).toHaveURL(/\/sign-in/);
  await page.reload();
  await expect(page).toHaveURL(/\/account/);
  await elsewhere.close();
});

test('a person changes name and password', async ({ page }) => {
  const email = await signUpAndConfirm(page);
  await open(page, '/account');
  await page.getByLabel('Your name').fill('Ada Lind');
  await page.getByRole('button', { name: 'Save the name' }).click();
  await expect(page.getByText('Your name is changed.')).toBeVisible();
  await page.getByLabel('Present password').fill('not the present one');
  await page.getByLabel('New password').fill(other);
  await page.getByRole('button', { name: 'Change the password' }).click();
  await expect(page.getByText('This is not your present password.')).toBeVisible();
  await page.getByLabel('Present password').fill(password);
  await page.getByLabel('New password').fill(other);
  await page.getByRole('button', { name: 'Change the password' }).click();
  await expect(page.getByText('Your password is changed.')).toBeVisible();
  await waitForLetter(lettersUrl(), email, 'Your password was changed');
  await signOut(page);
  await signIn(page, email, other);
});

test('signing in works without script', async ({ browser }) => {
  const context = await browser.newContext({ javaScriptEnabled: false });
  const page = await context.newPage();
  await page.goto('/sign-in');
  await page.getByLabel('E-mail address').fill('nobody@people.example');
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByText('do not belong together')).toBeVisible();
  await expect(page.getByLabel('E-mail address')).toHaveValue('nobody@people.example');
  await context.close();
});

test('answers carry the security headers, and cookies their flags', async ({ page, request }) => {
  const headers = (await request.get('/sign-in')).headers();
  expect(headers['content-security-policy']).toMatch(/script-src 'self' 'nonce-/);
  expect(headers['content-security-policy']).toContain("frame-ancestors 'none'");
  expect(headers).toMatchObject({
    'x-content-type-options': 'nosniff',
    'x-frame-options': 'DENY',
    'referrer-policy': 'same-origin',
    'cross-origin-opener-policy': 'same-origin',
  });
  expect(headers['permissions-policy']).toContain('camera=()');
  await signInAs(page, 'reader');
  const cookie = (await page.context().cookies()).find(({ name }) => /^windlass-\d+$/.test(name));
  expect(cookie).toMatchObject({ httpOnly: true, sameSite: 'Lax', path: '/' });
});

test('a form sent from another site is refused', async ({ request, baseURL }) => {
  const send = (origin: string) =>
    request.post('/sign-out', { headers: { origin }, form: {}, maxRedirects: 0 });
  expect((await send('https://elsewhere.example')).status()).toBe(403);
  expect((await send(baseURL!)).status()).toBe(303);
});

test('the endpoints of the sign-in library are closed, and the probes open', async ({
  request,
}) => {
  for (const path of ['session', 'csrf', 'providers', 'signin']) {
    expect((await request.get(`/auth/${path}`)).status()).toBe(404);
  }
  expect((await request.get('/healthz')).status()).toBe(200);
  expect((await request.get('/readyz')).status()).toBe(200);
});

for (const colorScheme of ['light', 'dark'] as const) {
  test(`open pages are accessible at 390 px in the ${colorScheme} scheme`, async ({ browser }) => {
    const context = await browser.newContext({
      colorScheme,
      viewport: { width: 390, height: 844 },
    });
    const page = await context.newPage();
    for (const path of ['/', '/sign-in', '/sign-up', '/forgot', '/nowhere']) {
      await open(page, path);
      await expectAccessible(page);
    }
    await signInAs(page, 'lead');
    for (const path of ['/desk', '/account']) {
      await open(page, path);
      await expectAccessible(page);
    }
    await page.locator('summary', { hasText: 'Open:' }).click();
    await expect(page.getByRole('link', { name: 'Batches' })).toBeVisible();
    await expectAccessible(page);
    await page.keyboard.press('Escape');
    await expect(page.getByRole('link', { name: 'Batches' })).toBeHidden();
    await context.close();
  });
}
