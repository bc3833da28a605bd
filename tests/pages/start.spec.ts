/** `npm start` in a clone of its own: what it says of a taken port, a second start, and Ctrl-C. */
import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import {
  chmodSync,
  cpSync,
  mkdtempSync,
  readdirSync,
  readlinkSync,
  rmSync,
  symlinkSync,
} from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from '@playwright/test';
import { projectRoot } from '../../scripts/folders.mjs';
import { findFreePort, isPortFree } from '../../scripts/settings.mjs';
import { until } from '../support/until';

/** What a start writes or finds its own place by; all else is shared with this clone, its build included. */
const COPIED = ['package.json', 'package-lock.json', 'scripts'];
const LEFT_OUT = ['.git', '.windlass', 'test-results'];

let clone: string;
let env: Record<string, string>;

test.beforeAll(async () => {
  clone = mkdtempSync(join(tmpdir(), 'windlass-start-'));
  // PostgreSQL's own user must reach it where root runs the tests.
  chmodSync(clone, 0o755);
  for (const name of readdirSync(projectRoot).filter((each) => !LEFT_OUT.includes(each))) {
    if (COPIED.includes(name)) {
      cpSync(join(projectRoot, name), join(clone, name), { recursive: true });
    } else symlinkSync(join(projectRoot, name), join(clone, name));
  }
  env = { ...process.env, WINDLASS_DEMO: 'off' } as Record<string, string>;
  for (const name of ['', 'POSTGRES_', 'MAIL_CATCHER_SMTP_', 'MAIL_CATCHER_']) {
    env[`WINDLASS_${name}PORT`] = String(await findFreePort());
  }
});
test.afterAll(() => rmSync(clone, { recursive: true, force: true }));

/** Runs the command as a terminal would: in a group of its own, so that Ctrl-C reaches all of it. */
function start() {
  const child = spawn('npm', ['start'], { cwd: clone, env, detached: true });
  let said = '';
  for (const stream of [child.stdout, child.stderr]) {
    stream.on('data', (chunk: Buffer) => (said += chunk.toString()));
  }
  return { child, said: () => said };
}

async function exitCode(child: ChildProcess): Promise<number | null> {
  if (child.exitCode === null) await once(child, 'exit');
  return child.exitCode;
}

/** Processes that work in the clone. */
function processesOfClone(): string[] {
  const folderOf = (pid: string) => {
    try {
      return readlinkSync(`/proc/${pid}/cwd`);
    } catch {
      return '';
    }
  };
  return readdirSync('/proc').filter((pid) => /^\d+$/.test(pid) && folderOf(pid).startsWith(clone));
}

test('a taken port is named, with a way out', async () => {
  const other = createServer().listen(Number(env['WINDLASS_PORT']), '127.0.0.1');
  await once(other, 'listening');
  const { child, said } = start();
  expect(await exitCode(child)).toBe(1);
  expect(said()).toContain(`${env['WINDLASS_PORT']} for the web`);
  expect(said()).toMatch(/WINDLASS_PORT=\d+ npm start/);
  other.close();
});

test('a second start finds the first, and Ctrl-C ends everything', async () => {
  const first = start();
  const address = `http://127.0.0.1:${env['WINDLASS_PORT']}`;
  try {
    const isReady = async () => {
      if (first.child.exitCode !== null) throw new Error(`The start ended:\n${first.said()}`);
      return first.said().includes('is ready');
    };
    await until('the product to be ready', isReady, 200);
    expect(first.said()).toContain(`Windlass is ready: ${address}`);
    expect((await fetch(`${address}/readyz`)).status).toBe(200);
    const second = start();
    expect(await exitCode(second.child)).toBe(0);
    expect(second.said()).toMatch(/Already running \(process \d+\)/);
    expect(second.said()).toContain(address);
  } finally {
    if (first.child.exitCode === null) process.kill(-first.child.pid!, 'SIGINT');
  }
  // npm passes the signal on and may itself end by it, before the product has.
  expect([0, null]).toContain(await exitCode(first.child));
  for (const [name, port] of Object.entries(env).filter(([each]) =>
    /^WINDLASS_.*PORT$/.test(each),
  )) {
    await until(`${name} to be free`, () => isPortFree(Number(port)));
  }
  await expect.poll(processesOfClone).toEqual([]);
});
