/** Webhooks of a team from adding to the log, and the operator's page with a worker that pauses. */
import { expect, test } from '@playwright/test';
import { startReceiver, status } from '../support/receiver';
import { compute, expectAccessible, open, readPasted, signInAs } from '../support/pages';

test('a lead is told of a finished batch, and an operator pauses a worker', async ({
  page,
  request,
}) => {
  const receiver = await startReceiver(status(500));
  page.on('dialog', (dialog) => void dialog.accept());
  await signInAs(page, 'lead');

  await open(page, '/team/webhooks');
  await page.getByLabel('Name').fill('Notebook');
  await page.getByLabel('Address').fill('https://10.1.2.3/finished');
  await page.getByRole('button', { name: 'Add the webhook' }).click();
  await expect(page.getByText('private or reserved network')).toBeVisible();
  await page.getByLabel('Address').fill(receiver.url);
  await page.getByRole('button', { name: 'Add the webhook' }).click();
  await expect(page.getByText(/^windlass_hook_/)).toBeVisible();
  await expectAccessible(page);

  await readPasted(page, 'Told of', 'CCCO propanol');
  await compute(page);
  await open(page, '/team/webhooks');
  await page.getByRole('link', { name: 'Log of Notebook' }).click();
  const row = page.getByRole('row').filter({ hasText: 'batch.finished' }).first();
  await expect(row).toContainText('The answer was 500', { timeout: 120_000 });
  await expectAccessible(page);
  receiver.answerWith(status(204));
  await row.getByRole('button', { name: /^Send/ }).click();
  await expect(row).toContainText('Delivered');
  expect(receiver.received.at(-1)!.headers['windlass-event']).toBe('batch.finished');

  await open(page, '/operator');
  const worker = page.getByRole('row').filter({ hasText: 'Takes tasks' });
  await worker.getByRole('button', { name: /^Pause/ }).click();
  const paused = page.getByRole('row').filter({ hasText: 'Paused' });
  await expect(paused).toBeVisible();
  await expectAccessible(page);
  // The page keeps itself up to date and takes nobody's focus away.
  const resume = paused.getByRole('button', { name: /^Resume/ });
  await resume.focus();
  const update = () =>
    page.waitForResponse((response) => response.url().includes('/operator/__data.json'));
  // With the second one the first is on the page.
  await update();
  await update();
  await expect(resume).toBeFocused();
  await page.keyboard.press('Enter');
  await expect(worker).toBeVisible();
  await page.setViewportSize({ width: 390, height: 800 });
  await expectAccessible(page);

  await open(page, '/team/webhooks');
  await page.getByRole('button', { name: 'Remove Notebook' }).click();
  await expect(page.getByText('No webhooks')).toBeVisible();
  await receiver.stop();

  expect((await request.get('/operator')).status()).toBe(404);
  await page.context().clearCookies();
  await signInAs(page, 'modeler');
  expect((await page.request.get('/operator')).status()).toBe(404);
  const forged = await page.request.post('/operator?/order', {
    form: { worker: 'any', order: 'pause' },
    headers: { origin: new URL(page.url()).origin },
  });
  expect(forged.status()).toBe(404);
  const metrics = await request.get('/metrics');
  expect(await metrics.text()).toContain('windlass_http_request_seconds_count{method="GET"');
  const forwarded = await request.get('/metrics', { headers: { 'x-forwarded-for': '192.0.2.1' } });
  expect(forwarded.status()).toBe(404);
});
