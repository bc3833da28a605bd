/** Web, worker, mail catcher and a provider of invented identities as one product on given ports; used by `npm start`, `npm run dev` and the page tests. */
import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { buildProduct } from './build.mjs';
import { projectRoot } from './folders.mjs';
import { startIdentityProvider } from './identity-provider.mjs';
import { startMailCatcher } from './mail-catcher.mjs';
import { runProgram, superviseProgram } from './processes.mjs';

const READY_PATIENCE_MS = 120_000;
const LARGEST_UPLOAD = '56M';

/** How each program is started: from the build, or from the sources with hot reload. */
async function choosePrograms({ isDevelopment, host, ports }) {
  if (isDevelopment) {
    spawnSync('npx', ['--no-install', 'svelte-kit', 'sync'], { cwd: projectRoot });
    const vite = ['node_modules/vite/bin/vite.js', 'dev', '--strictPort'];
    return {
      migrate: ['--import', 'tsx', 'worker/migrate.ts'],
      seed: ['--import', 'tsx', 'worker/seed.ts'],
      web: [...vite, '--host', host, '--port', String(ports.web)],
      worker: ['node_modules/tsx/dist/cli.mjs', 'watch', '--clear-screen=false', 'worker/main.ts'],
    };
  }
  const folder = await buildProduct();
  return {
    migrate: [join(folder, 'worker/migrate.js')],
    seed: [join(folder, 'worker/seed.js')],
    web: [join(folder, 'web/index.js')],
    worker: [join(folder, 'worker/main.js')],
  };
}

/** The settings of the programs, as src/lib/server/environment.ts and the web server read them. */
function makeVariables(
  { isDevelopment, host, ports, origin, databaseUrl, variables },
  catcher,
  identityProvider,
) {
  return {
    ...process.env,
    NODE_ENV: isDevelopment ? 'development' : 'production',
    WINDLASS_WEB_HOST: host,
    WINDLASS_WEB_PORT: String(ports.web),
    WINDLASS_WEB_ORIGIN: origin,
    WINDLASS_WEB_BODY_SIZE_LIMIT: LARGEST_UPLOAD,
    WINDLASS_WEB_SHUTDOWN_TIMEOUT: '3',
    ...variables,
    DATABASE_URL: databaseUrl,
    WINDLASS_ORIGIN: origin,
    ...(catcher && {
      WINDLASS_SMTP_URL: catcher.smtpUrl,
      WINDLASS_MAIL_CATCHER_URL: catcher.lettersUrl,
    }),
    ...identityProvider?.variables,
  };
}

/** The seed says whom to sign in as, between lines of its log. */
function readSignIns(lines, print) {
  const isSignIn = (line) => line.startsWith('{"email"');
  for (const line of lines) if (!isSignIn(line)) print('seed', line);
  return lines.filter(isSignIn).map((line) => JSON.parse(line));
}

async function isReady(address) {
  try {
    const response = await fetch(`${address}/readyz`, { signal: AbortSignal.timeout(5_000) });
    return response.ok;
  } catch {
    return false;
  }
}

async function waitUntilReady(address) {
  const end = Date.now() + READY_PATIENCE_MS;
  while (!(await isReady(address))) {
    if (Date.now() > end) {
      throw new Error(`Nothing answers at ${address}; the log above may say why.`);
    }
    await wait(250);
  }
}

/**
 * Everything but the database, which must be there.
 * @param {{
 *   isDevelopment: boolean, host: string, origin: string, databaseUrl: string,
 *   ports: { web: number, smtp: number, letters: number, identity: number }, catchMail: boolean,
 *   inventIdentities: boolean, seed: boolean,
 *   variables: Record<string, string>, print: (name: string, line: string) => void,
 * }} settings
 * @returns {{ start: () => Promise<{ address: string, lettersUrl: string | null, issuer: string | null, signIns: object[] }>,
 *   stop: () => Promise<void> }} `start` waits until the product answers; `stop` may be called at any time
 */
export function createProduct(settings) {
  const { host, ports, print } = settings;
  const running = [];
  let isStopped = false;
  const keep = (part) => {
    running.push(part);
    if (isStopped) throw new Error('Stopped while starting.');
    return part;
  };
  const start = async () => {
    const programs = await choosePrograms(settings);
    const catcher = settings.catchMail
      ? keep(await startMailCatcher({ smtpPort: ports.smtp, httpPort: ports.letters }))
      : null;
    const identityProvider = settings.inventIdentities
      ? keep(await startIdentityProvider({ port: ports.identity, origin: settings.origin }))
      : null;
    const env = makeVariables(settings, catcher, identityProvider);
    const once = (name) => runProgram({ args: programs[name], env }, { name, print });
    await once('migrate');
    const signIns = settings.seed ? readSignIns(await once('seed'), print) : [];
    for (const name of ['web', 'worker']) {
      const mayEnd = name === 'worker';
      if (!isStopped)
        keep(superviseProgram({ args: programs[name], env }, { name, print, mayEnd }));
    }
    const address = `http://${host === '0.0.0.0' ? '127.0.0.1' : host}:${ports.web}`;
    await waitUntilReady(address);
    return {
      address,
      lettersUrl: catcher?.lettersUrl ?? null,
      issuer: identityProvider?.issuer ?? null,
      signIns,
    };
  };
  const stop = async () => {
    isStopped = true;
    await Promise.all(running.splice(0).map((each) => each.stop()));
  };
  return { start, stop };
}
