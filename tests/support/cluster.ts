/** Before the flow tests: a database cluster of this run with a migrated template, and a mail catcher. */
import { fileURLToPath } from 'node:url';
import type { TestProject } from 'vitest/node';
import { startMailCatcher } from '../../scripts/mail-catcher.mjs';
import { findFreePort } from '../../scripts/settings.mjs';
import { startTestCluster } from '../../scripts/test-cluster.mjs';
import { migrateDatabase } from '../../src/lib/server/db/migrate';

declare module 'vitest' {
  interface ProvidedContext {
    /** Owner's and application's address of the cluster; the application's database is the template. */
    cluster: { adminUrl: string; url: string };
    mail: { smtpUrl: string; lettersUrl: string };
  }
}

export default async function setUp(project: TestProject): Promise<() => Promise<void>> {
  const cluster = await startTestCluster();
  const catcher = await startMailCatcher({
    smtpPort: await findFreePort(),
    httpPort: await findFreePort(),
  });
  const end = async () => {
    await catcher.stop();
    cluster.remove();
  };
  try {
    const migrations = fileURLToPath(new URL('../../drizzle', import.meta.url));
    await migrateDatabase(cluster.url, migrations);
  } catch (error) {
    await end();
    throw error;
  }
  project.provide('cluster', { adminUrl: cluster.adminUrl, url: cluster.url });
  project.provide('mail', { smtpUrl: catcher.smtpUrl, lettersUrl: catcher.lettersUrl });
  return end;
}
