/** Before the page tests: the whole product on free ports with a database of its own, built from the present sources. */
import { randomBytes } from 'node:crypto';
import { createWriteStream, mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { windlassFolder } from '../../scripts/folders.mjs';
import { keepRunning } from '../../scripts/postgres.mjs';
import { createProduct } from '../../scripts/product.mjs';
import { findFreePort } from '../../scripts/settings.mjs';
import { startTestCluster } from '../../scripts/test-cluster.mjs';

const LOG = join(windlassFolder, 'pages.log');

export default async function setUp(): Promise<() => Promise<void>> {
  mkdirSync(windlassFolder, { recursive: true });
  const log = createWriteStream(LOG);
  const cluster = await startTestCluster();
  const ports = {
    web: await findFreePort(),
    smtp: await findFreePort(),
    letters: await findFreePort(),
    identity: await findFreePort(),
  };
  const origin = `http://127.0.0.1:${ports.web}`;
  const demoPassword = 'nine lanterns over the pier';
  const product = createProduct({
    // Quicker to begin with while writing tests; what ships is the build.
    isDevelopment: process.env['WINDLASS_TEST_DEV'] === '1',
    host: '127.0.0.1',
    origin,
    databaseUrl: cluster.url,
    ports,
    catchMail: true,
    inventIdentities: true,
    seed: true,
    variables: {
      AUTH_SECRET: randomBytes(32).toString('hex'),
      WINDLASS_DEMO_PASSWORD: demoPassword,
      // All tests come from one address.
      WINDLASS_RATE_LIMIT_FACTOR: '1000',
      // Receivers of webhooks are a part of the tests, on this machine.
      WINDLASS_WEBHOOK_NETWORKS: '127.0.0.0/8',
      WINDLASS_WEBHOOK_HTTP: 'on',
    },
    print: (name: string, line: string) => log.write(`${name} | ${line}\n`),
  });
  const stopKeeping = keepRunning(cluster, (line: string) => log.write(`${line}\n`));
  const end = async () => {
    await product.stop();
    stopKeeping();
    cluster.remove();
    log.end();
  };
  try {
    const { lettersUrl } = await product.start();
    Object.assign(process.env, {
      WINDLASS_TEST_ADDRESS: origin,
      WINDLASS_TEST_LETTERS_URL: lettersUrl ?? '',
      WINDLASS_TEST_DEMO_PASSWORD: demoPassword,
      WINDLASS_TEST_DATABASE_URL: cluster.url,
      WINDLASS_TEST_ADMIN_URL: cluster.adminUrl,
    });
  } catch (error) {
    await end();
    throw new Error(`The product did not start; its log is in ${LOG}`, { cause: error });
  }
  return end;
}
