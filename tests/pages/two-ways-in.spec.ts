/** The second factor, and single sign-on through the provider of invented people, as a person goes them in a browser. */
import { expect, test, type Page } from '@playwright/test';
import { Secret, TOTP } from 'otpauth';
import postgres from 'postgres';
import { waitForLetter } from '../support/letters';
import {
  databaseUrl,
  demoMembers,
  demoPassword,
  expectAccessible,
  lettersUrl,
  open,
  signIn,
} from '../support/pages';

async function signOut(page: Page): Promise<void> {
  await page.locator('summary', { hasText: 'Account:' }).click();
  await page.getByRole('button', { name: 'Sign out' }).click();
}

const code = (page: Page) => page.getByRole('textbox', { name: 'Code' });

test('a person switches a second factor on, signs in with it, and switches it off', async ({
  page,
}) => {
  const { chemist } = demoMembers;
  await signIn(page, chemist, demoPassword());
  await open(page, '/account/second-factor');
  await expectAccessible(page);
  const shown = await page.locator('[data-secret]').innerText();
  const app = new TOTP({ secret: Secret.fromBase32(shown.replace(/\s/g, '')) });
  // The step before the present one is still taken, and leaves the present one for signing in.
  await code(page).fill(app.generate({ timestamp: Date.now() - 30_000 }));
  await page.getByRole('button', { name: 'Switch it on' }).click();
  await expect(page.getByText('The second factor is on')).toBeVisible();
  await expectAccessible(page);
  const recovery = await page.locator('[data-recovery-codes] li').allInnerTexts();
  expect(recovery).toHaveLength(10);
  const download = page.waitForEvent('download');
  await page.getByRole('link', { name: 'Download as text' }).click();
  expect((await download).suggestedFilename()).toBe('windlass-recovery-codes.txt');
  await waitForLetter(lettersUrl(), chemist, 'Your second factor is on');

  await signOut(page);
  await open(page, '/sign-in?next=%2Fqueue');
  await page.getByLabel('E-mail address').fill(chemist);
  await page.getByLabel('Password').fill(demoPassword());
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL('**/sign-in/code?**');
  await expectAccessible(page);
  // The first step alone opens nothing.
  await open(page, '/desk');
  await expect(page).toHaveURL(/\/sign-in[?]next=/);
  await open(page, '/sign-in/code?next=%2Fqueue');
  await code(page).fill('abcde-fghjk');
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await expect(page.getByText('This code is not right, or it was used already.')).toBeVisible();
  await code(page).fill(recovery[0]!.toUpperCase());
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL('**/queue');

  page.on('dialog', (dialog) => void dialog.accept());
  await open(page, '/account/second-factor');
  await expect(page.getByText('9 are left.')).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Switch it off' }).click();
  await expect(page.getByText('The second factor is off')).toBeVisible();
});

test('a person comes in through the identity provider, proves it again, and leaves', async ({
  page,
}) => {
  await open(page, '/sign-in?next=%2Faccount');
  const provider = page.getByRole('link', { name: 'Sign in through Skerry ID' });
  await provider.click();
  await page.getByRole('button', { name: 'Cancel' }).click();
  await expect(page.getByText('Nobody was signed in')).toBeVisible();
  await expectAccessible(page);

  await provider.click();
  await page.getByRole('button', { name: 'Pia Nowak' }).click();
  await expect(page.getByText('Your address is not verified there')).toBeVisible();

  await open(page, '/sign-in?fault=unverified&next=%2Faccount');
  await expectAccessible(page);
  await provider.click();
  await page.getByRole('button', { name: 'Runa Dahl' }).click();
  await page.waitForURL('**/account');
  await expect(page.getByText('This account opens through Skerry ID.')).toBeVisible();
  await expect(
    page.getByText('This account has none: you sign in through Skerry ID'),
  ).toBeVisible();
  await expectAccessible(page);

  // An hour later what is dangerous asks again.
  const sql = postgres(databaseUrl(), { max: 1 });
  await sql`update sessions set proved_at = now() - interval '1 hour'
    where user_id = (select id from users where email = 'runa.dahl@skerry.example')`;
  await sql.end();
  await open(page, '/account/tokens');
  await page.getByLabel('Name').fill('nightly scans');
  await page.getByRole('button', { name: 'Make the token' }).click();
  await page.waitForURL('**/again?**');
  await expectAccessible(page);
  await page.getByRole('link', { name: 'Prove it through Skerry ID' }).click();
  await page.getByRole('button', { name: 'Malik Osei' }).click();
  await expect(page.getByText('That was somebody else')).toBeVisible();
  await open(page, '/again?next=%2Faccount%2Ftokens%3Fname%3Dnightly%2Bscans');
  await page.getByRole('link', { name: 'Prove it through Skerry ID' }).click();
  await page.getByRole('button', { name: 'Runa Dahl' }).click();
  await page.waitForURL('**/account/tokens?**');
  await expect(page.getByLabel('Name')).toHaveValue('nightly scans');
  await page.locator('html[data-alive]').waitFor();
  await page.getByRole('button', { name: 'Make the token' }).click();
  await expect(page.getByText('The token is made')).toBeVisible();

  await signOut(page);
  await expect(page.getByRole('heading', { name: 'You are signed out' })).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('link', { name: 'Sign out there, too' }).click();
  await expect(page).toHaveURL(/\/session\/end/);
});
