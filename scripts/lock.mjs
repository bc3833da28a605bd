/** A lock between processes of one clone: a file that holds the number of the process that owns it. */
import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { windlassFolder } from './folders.mjs';

/** True for a process that ended but that its parent has not taken note of yet. */
function isDefunct(pid) {
  try {
    return /^State:\s+Z/m.test(readFileSync(`/proc/${pid}/status`, 'utf8'));
  } catch {
    // No /proc on this system, or the process is gone.
    return false;
  }
}

/** True when the process runs; a process of another user counts as well. */
export function isAlive(pid) {
  try {
    process.kill(pid, 0);
  } catch (error) {
    if (error.code !== 'EPERM') return false;
  }
  return !isDefunct(pid);
}

/** Creates a file for its owner only, which must not exist yet; false when it was there already. */
export function createExclusively(path, content) {
  mkdirSync(dirname(path), { recursive: true });
  try {
    writeFileSync(path, content, { flag: 'wx', mode: 0o600 });
    return true;
  } catch (error) {
    if (error.code === 'EEXIST') return false;
    throw error;
  }
}

function removeLeftOver(path) {
  try {
    const owner = Number(readFileSync(path, 'utf8'));
    if (owner > 0 && !isAlive(owner)) rmSync(path, { force: true });
  } catch (error) {
    if (error.code !== 'ENOENT') throw error;
  }
}

/** Runs `task` while no other process of this clone runs one under the same name. */
export async function withLock(name, task) {
  const path = join(windlassFolder, `${name}.lock`);
  while (!createExclusively(path, String(process.pid))) {
    removeLeftOver(path);
    await wait(200);
  }
  try {
    return await task();
  } finally {
    rmSync(path, { force: true });
  }
}
