/** Makes sure the npm packages of package-lock.json are installed; plain Node.js, because it runs before anything is. */
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';

export const projectRoot = dirname(dirname(fileURLToPath(import.meta.url)));
const stamp = join(projectRoot, 'node_modules', '.windlass-installed');
const lock = join(projectRoot, '.windlass', 'install.lock');
/** An install takes about a minute; a lock much older than that was left by a killed process. */
const STALE_LOCK_MS = 10 * 60_000;

function lockfileHash() {
  return createHash('sha256')
    .update(readFileSync(join(projectRoot, 'package-lock.json')))
    .digest('hex');
}

function isInstalled() {
  try {
    return readFileSync(stamp, 'utf8') === lockfileHash();
  } catch {
    return false;
  }
}

function takeLock() {
  mkdirSync(dirname(lock), { recursive: true });
  try {
    mkdirSync(lock);
    return true;
  } catch (error) {
    if (error.code !== 'EEXIST') throw error;
    const age = Date.now() - (statSync(lock, { throwIfNoEntry: false })?.mtimeMs ?? 0);
    if (age > STALE_LOCK_MS) rmSync(lock, { recursive: true, force: true });
    return false;
  }
}

/** Installs the packages when they are missing or out of date; safe to run beside another copy of itself. */
export async function installPackages() {
  while (!isInstalled()) {
    if (!takeLock()) {
      await wait(500);
      continue;
    }
    try {
      if (isInstalled()) return;
      console.log('Installing npm packages …');
      const { status } = spawnSync('npm', ['ci', '--no-fund', '--no-audit', '--loglevel=error'], {
        cwd: projectRoot,
        stdio: 'inherit',
      });
      if (status !== 0) throw new Error(`npm ci failed with exit code ${status}`);
      writeFileSync(stamp, lockfileHash());
    } finally {
      rmSync(lock, { recursive: true, force: true });
    }
  }
}
