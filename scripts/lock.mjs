/** A lock between processes of one clone: a file that holds the number of the process that owns it. */
import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { windlassFolder } from './folders.mjs';

/** True when the process is there; a process of another user counts as well. */
export function isAlive(pid) {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === 'EPERM';
  }
}

/** Creates a file that must not exist yet and puts `content` in; false when it was there already. */
export function createExclusively(path, content) {
  mkdirSync(dirname(path), { recursive: true });
  try {
    writeFileSync(path, content, { flag: 'wx' });
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
