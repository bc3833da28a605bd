/** The settings of a start: ports from the environment, secrets made on the first start and kept in .windlass. */
import { randomBytes, randomInt } from 'node:crypto';
import { chmodSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { windlassFolder } from './folders.mjs';

/** A message for the person at the terminal; shown without a stack trace. */
export class StartError extends Error {}

const secretsFile = join(windlassFolder, 'secrets.env');
const DEFAULT_PORT = 4810;
const LOOPBACK = ['127.0.0.1', 'localhost', '::1', '[::1]'];

export function isLoopback(host) {
  return LOOPBACK.includes(host);
}

/** Reads a port from the environment. */
function readPort(name, fallback) {
  const text = process.env[name];
  if (!text) return fallback;
  const port = Number(text);
  if (!Number.isInteger(port) || port < 1 || port > 65_535) {
    throw new StartError(`${name} must be a port between 1 and 65535, not "${text}".`);
  }
  return port;
}

/** The ports of one product; WINDLASS_PORT alone moves all of them, so that clones can stand beside each other. */
export function readPorts() {
  const web = readPort('WINDLASS_PORT', DEFAULT_PORT);
  return {
    web,
    postgres: readPort('WINDLASS_POSTGRES_PORT', web + 1),
    smtp: readPort('WINDLASS_MAIL_CATCHER_SMTP_PORT', web + 5),
    letters: readPort('WINDLASS_MAIL_CATCHER_PORT', web + 6),
    identity: readPort('WINDLASS_IDENTITY_PORT', web + 7),
  };
}

/** True when nothing listens on the port of the host. */
export function isPortFree(port, host = '127.0.0.1') {
  return new Promise((resolve) => {
    const probe = createServer()
      .once('error', () => resolve(false))
      .once('listening', () => probe.close(() => resolve(true)))
      .listen(port, host);
  });
}

/** A port that nobody uses at the moment, chosen at random by the operating system. */
export function findFreePort() {
  return new Promise((resolve, reject) => {
    const probe = createServer()
      .once('error', reject)
      .listen(0, '127.0.0.1', () => {
        const { port } = probe.address();
        probe.close(() => resolve(port));
      });
  });
}

/** A password that is easy to read off the screen: four groups of letters and digits that look alike to nobody. */
function readablePassword() {
  const letters = 'abcdefghjkmnpqrstuvwxyz23456789';
  const group = () => Array.from({ length: 4 }, () => letters[randomInt(letters.length)]).join('');
  return Array.from({ length: 4 }, group).join('-');
}

const makers = {
  AUTH_SECRET: () => randomBytes(32).toString('base64url'),
  WINDLASS_POSTGRES_ADMIN_PASSWORD: () => randomBytes(24).toString('base64url'),
  WINDLASS_POSTGRES_PASSWORD: () => randomBytes(24).toString('base64url'),
  WINDLASS_DEMO_PASSWORD: readablePassword,
};

function readSecretsFile() {
  try {
    const lines = readFileSync(secretsFile, 'utf8').split('\n');
    return Object.fromEntries(
      lines
        .filter((line) => /^[A-Z_]+=/.test(line))
        .map((line) => [line.slice(0, line.indexOf('=')), line.slice(line.indexOf('=') + 1)]),
    );
  } catch (error) {
    if (error.code === 'ENOENT') return {};
    throw error;
  }
}

/** The secrets of this clone; what is missing is made and written down. The environment goes before the file. */
export function readSecrets() {
  const stored = readSecretsFile();
  const missing = Object.keys(makers).filter((name) => !stored[name]);
  for (const name of missing) stored[name] = makers[name]();
  if (missing.length > 0) {
    mkdirSync(windlassFolder, { recursive: true });
    const lines = Object.entries(stored).map(([name, value]) => `${name}=${value}`);
    writeFileSync(secretsFile, `${lines.join('\n')}\n`, { mode: 0o600 });
    chmodSync(secretsFile, 0o600);
  }
  const given = Object.keys(makers).filter((name) => process.env[name]);
  return { ...stored, ...Object.fromEntries(given.map((name) => [name, process.env[name]])) };
}
