/** Gives every flow test file a database of its own, cloned from the migrated template and dropped afterwards. */
import { randomBytes } from 'node:crypto';
import postgres from 'postgres';
import { afterAll, inject } from 'vitest';
import { deliverBy } from './letters';

const { adminUrl, url } = inject('cluster');
const template = new URL(url).pathname.slice(1);
const name = `flow_${randomBytes(6).toString('hex')}`;

async function asAdmin(command: string): Promise<void> {
  const admin = postgres(adminUrl, { max: 1, onnotice: () => undefined });
  try {
    await admin.unsafe(command);
  } finally {
    await admin.end();
  }
}

await asAdmin(`create database ${name} template ${template} owner windlass`);

const own = new URL(url);
own.pathname = `/${name}`;
// Set before any module of the server is loaded, since they read their settings once.
Object.assign(process.env, {
  DATABASE_URL: own.href,
  AUTH_SECRET: randomBytes(32).toString('hex'),
  WINDLASS_SMTP_URL: inject('mail').smtpUrl,
  // Nothing answers there; what it would say is given to the functions that listen to it.
  WINDLASS_OIDC_ISSUER: 'https://identity.example',
  WINDLASS_OIDC_CLIENT_ID: 'windlass',
  WINDLASS_OIDC_CLIENT_SECRET: 'no secret, since nobody listens',
  WINDLASS_DEMO_PASSWORD: 'nine lanterns over the pier',
  WINDLASS_LOG_LEVEL: process.env['WINDLASS_LOG_LEVEL'] ?? 'silent',
});

deliverBy(async () => {
  const { deliverWaiting } = await import('../../src/lib/server/letter-delivery');
  const { closeMail } = await import('../../src/lib/server/mail');
  await closeMail();
  await deliverWaiting();
});

afterAll(async () => {
  const { closeDatabase } = await import('../../src/lib/server/db');
  const { stopQueue } = await import('../../src/lib/server/queue');
  await stopQueue();
  await closeDatabase();
  await asAdmin(`drop database ${name} with (force)`);
});
