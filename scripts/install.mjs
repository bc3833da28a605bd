/** Makes sure the npm packages of package-lock.json are installed; plain Node.js, because it runs before anything is. */
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { projectRoot } from './folders.mjs';
import { withLock } from './lock.mjs';

const stamp = join(projectRoot, 'node_modules', '.windlass-installed');

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

/** Installs the packages when they are missing or out of date; safe to run beside another copy of itself. */
export async function installPackages() {
  if (isInstalled()) return;
  await withLock('install', () => {
    if (isInstalled()) return;
    console.log('Installing npm packages …');
    const { status } = spawnSync('npm', ['ci', '--no-fund', '--no-audit', '--loglevel=error'], {
      cwd: projectRoot,
      stdio: 'inherit',
    });
    if (status !== 0) throw new Error(`npm ci failed with exit code ${status}`);
    writeFileSync(stamp, lockfileHash());
  });
}
