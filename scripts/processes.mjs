/** Child processes under one supervisor: prefixed logs, restart after a crash, and an end that leaves nothing behind. */
import { spawn } from 'node:child_process';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { projectRoot } from './folders.mjs';

const FIRST_DELAY_MS = 500;
const LONGEST_DELAY_MS = 30_000;
/** A child that ran this long was healthy: its next crash is not part of a row of crashes. */
const HEALTHY_MS = 60_000;
const PATIENCE_MS = 10_000;
const leaveWithParent = fileURLToPath(new URL('./leave-with-parent.mjs', import.meta.url));

/** Signals a child and all that it started. */
function signalGroup(child, signal) {
  try {
    process.kill(-child.pid, signal);
  } catch (error) {
    if (error.code !== 'ESRCH') throw error;
  }
}

/** Ends a child and all that it started: gently, then by force. */
async function end(child) {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const ended = new Promise((resolve) => child.once('exit', resolve));
  const force = setTimeout(() => signalGroup(child, 'SIGKILL'), PATIENCE_MS);
  signalGroup(child, 'SIGTERM');
  await ended;
  clearTimeout(force);
}

function start({ args, env }, onLine) {
  const child = spawn(process.execPath, ['--import', leaveWithParent, ...args], {
    cwd: projectRoot,
    env,
    stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
    // In a group of its own: the terminal's Ctrl-C reaches only the supervisor, which ends the children in order.
    detached: true,
  });
  for (const stream of [child.stdout, child.stderr]) {
    createInterface({ input: stream }).on('line', onLine);
  }
  return child;
}

/**
 * Keeps a Node.js program running until stopped.
 * @param {{ args: string[], env: Record<string, string> }} program
 * @param {{ name: string, print: (name: string, line: string) => void, mayEnd?: boolean }} options
 * A program that `mayEnd` stays down when it ended well, as a worker does that was drained.
 * @returns {{ stop: () => Promise<void> }}
 */
export function superviseProgram(program, { name, print, mayEnd = false }) {
  let child;
  let timer;
  let isStopping = false;
  let delay = FIRST_DELAY_MS;
  const run = () => {
    const startedAt = Date.now();
    child = start(program, (line) => print(name, line));
    child.once('exit', (code, signal) => {
      if (isStopping) return;
      // What a crashed child had started must not work on beside its successor.
      signalGroup(child, 'SIGKILL');
      if (mayEnd && code === 0) {
        print(name, 'ended well and stays down until the next start');
        return;
      }
      if (Date.now() - startedAt > HEALTHY_MS) delay = FIRST_DELAY_MS;
      print(name, `ended with ${signal ?? `code ${code}`}; starting it again in ${delay / 1000} s`);
      timer = setTimeout(run, delay);
      delay = Math.min(delay * 2, LONGEST_DELAY_MS);
    });
  };
  run();
  return {
    stop: async () => {
      isStopping = true;
      clearTimeout(timer);
      await end(child);
    },
  };
}

/** Runs a Node.js program to its end; rejects unless it ends well. Returns what it wrote to standard output. */
export function runProgram(program, { name, print }) {
  return new Promise((resolve, reject) => {
    const output = [];
    const child = spawn(process.execPath, ['--import', leaveWithParent, ...program.args], {
      cwd: projectRoot,
      env: program.env,
      stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
    });
    createInterface({ input: child.stdout }).on('line', (line) => output.push(line));
    createInterface({ input: child.stderr }).on('line', (line) => print(name, line));
    child.once('error', reject);
    child.once('close', (code) => {
      if (code === 0) resolve(output);
      else reject(new Error(`${name} ended with code ${code}\n${output.join('\n')}`));
    });
  });
}
