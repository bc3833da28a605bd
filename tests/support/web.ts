/** The built web on the database of a test file, asked by plain requests. */
import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { join } from 'node:path';
import { encode } from '@auth/core/jwt';
import { buildProduct } from '../../scripts/build.mjs';
import { findFreePort } from '../../scripts/settings.mjs';
import * as sessions from '$lib/server/sessions';
import type { Proof } from '$lib/server/sessions';
import { client } from './accounts';
import { until } from './until';

export interface Web {
  readonly origin: string;
  /** A cookie header by which a person is signed in. */
  readonly signIn: (userId: string, proof?: Proof) => Promise<string>;
  /** The cookie header that names a session. */
  readonly cookieOf: (sessionId: string) => Promise<string>;
  readonly stop: () => Promise<void>;
}

async function isReady(origin: string): Promise<boolean> {
  return fetch(`${origin}/readyz`).then(
    ({ ok }) => ok,
    () => false,
  );
}

/** Builds the product where its sources changed, and starts its web; `settings` are environment variables. */
export async function startWeb(settings: Record<string, string> = {}): Promise<Web> {
  const isDevelopment = process.env['WINDLASS_TEST_DEV'] === '1';
  const port = await findFreePort();
  const origin = settings['WINDLASS_ORIGIN'] ?? `http://127.0.0.1:${port}`;
  // Quicker to begin with while writing tests; what ships is the build.
  const program = isDevelopment
    ? [
        'node_modules/vite/bin/vite.js',
        'dev',
        '--strictPort',
        '--host',
        '127.0.0.1',
        '--port',
        `${port}`,
      ]
    : [join(await buildProduct(), 'web/index.js')];
  const web: ChildProcess = spawn(process.execPath, program, {
    stdio: ['ignore', 'ignore', 'inherit'],
    env: {
      ...process.env,
      NODE_ENV: isDevelopment ? 'development' : 'production',
      WINDLASS_WEB_HOST: '127.0.0.1',
      WINDLASS_WEB_PORT: String(port),
      WINDLASS_WEB_ORIGIN: origin,
      WINDLASS_ORIGIN: origin,
      WINDLASS_RATE_LIMIT_FACTOR: '1000',
      ...settings,
    },
  });
  const address = `http://127.0.0.1:${port}`;
  await until('the web answers', () => isReady(address));
  const isSecure = origin.startsWith('https:');
  const name = isSecure ? '__Host-windlass' : `windlass-${new URL(origin).port}`;
  const cookieOf = async (sessionId: string) =>
    `${name}=${await encode({ token: { sessionId }, secret: process.env['AUTH_SECRET']!, salt: name })}`;
  return {
    origin: address,
    cookieOf,
    signIn: async (userId, proof) => cookieOf(await sessions.begin(userId, client, proof)),
    stop: async () => {
      const gone = once(web, 'exit');
      web.kill();
      await gone;
    },
  };
}
