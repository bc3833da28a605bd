/** Which start of this clone is running, so that a second one finds it: .windlass/running.json. */
import { readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { windlassFolder } from './folders.mjs';
import { createExclusively, isAlive } from './lock.mjs';

const file = join(windlassFolder, 'running.json');

function read() {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch (error) {
    if (error.code === 'ENOENT' || error instanceof SyntaxError) return null;
    throw error;
  }
}

/** After a crash of the machine the number may belong to any other program. */
function isStart(pid) {
  if (!isAlive(pid)) return false;
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').includes('scripts/start.mjs');
  } catch {
    // No /proc on this system: the number has to do.
    return true;
  }
}

/** Claims this clone for this process; false when another start runs in it. */
export function claimClone() {
  const claim = JSON.stringify({ pid: process.pid });
  if (createExclusively(file, claim)) return true;
  const other = read();
  if (other && isStart(other.pid)) return false;
  rmSync(file, { force: true });
  return createExclusively(file, claim);
}

/** Writes down what a second start will print. */
export function announce(message) {
  writeFileSync(file, JSON.stringify({ pid: process.pid, message }));
}

export function releaseClone() {
  if (read()?.pid === process.pid) rmSync(file, { force: true });
}

/** Waits until the other start has said where it answers; null when it ended before. */
export async function waitForOther() {
  for (;;) {
    const other = read();
    if (!other || !isStart(other.pid)) return null;
    if (other.message) return other;
    await wait(500);
  }
}
