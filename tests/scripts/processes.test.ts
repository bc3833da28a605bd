/** The supervisor of `npm start`. */
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { isAlive } from '../../scripts/lock.mjs';
import { runProgram, superviseProgram } from '../../scripts/processes.mjs';

const env = { PATH: process.env['PATH'] ?? '' };
let folder: string;
let printed: string[];
const print = (name: string, line: string) => printed.push(`${name}: ${line}`);

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'windlass-processes-'));
  printed = [];
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

/** A program that writes its number down and then does what `body` says. */
function program(body: string) {
  const path = join(folder, 'program.mjs');
  const log = join(folder, 'numbers');
  writeFileSync(
    path,
    `import { appendFileSync } from 'node:fs'; appendFileSync(${JSON.stringify(log)}, process.pid + '\\n'); ${body}`,
  );
  const numbers = () => {
    try {
      return readFileSync(log, 'utf8').trim().split('\n').map(Number);
    } catch {
      return [];
    }
  };
  return { args: [path], env, numbers };
}

async function until(condition: () => boolean): Promise<void> {
  for (let tries = 0; tries < 1000 && !condition(); tries += 1) await wait(30);
  expect(condition()).toBe(true);
}

describe('superviseProgram', () => {
  it('starts a crashed program again and says so', async () => {
    const crashing = program('process.exit(3);');
    const child = superviseProgram(crashing, { name: 'web', print });
    await until(() => crashing.numbers().length >= 2);
    await child.stop();
    expect(printed[0]).toBe('web: ended with code 3; starting it again in 0.5 s');
  });

  it('leaves a program down that may end and ended well, but not one that crashed', async () => {
    const ending = program('process.exit(0);');
    const child = superviseProgram(ending, { name: 'worker', print, mayEnd: true });
    await until(() => printed.length > 0);
    expect(printed).toEqual(['worker: ended well and stays down until the next start']);
    await child.stop();
    expect(ending.numbers()).toHaveLength(1);
    const crashing = program('process.exit(1);');
    const other = superviseProgram(crashing, { name: 'worker', print, mayEnd: true });
    await until(() => crashing.numbers().length >= 3);
    await other.stop();
  });

  it('ends the program and does not start it again', async () => {
    const waiting = program('setInterval(() => undefined, 1000);');
    const child = superviseProgram(waiting, { name: 'web', print });
    await until(() => waiting.numbers().length === 1);
    await child.stop();
    expect(waiting.numbers().filter(isAlive)).toEqual([]);
    expect(printed).toEqual([]);
  });

  it('ends what the program started as well', async () => {
    const parent = program(
      `import('node:child_process').then(({ spawn }) => {
        const inner = spawn(process.execPath, ['-e', 'setInterval(() => undefined, 1000)']);
        appendFileSync(${JSON.stringify(join(folder, 'numbers'))}, inner.pid + '\\n');
      });`,
    );
    const child = superviseProgram(parent, { name: 'web', print });
    await until(() => parent.numbers().length === 2);
    const numbers = parent.numbers();
    await child.stop();
    await until(() => numbers.every((number) => !isAlive(number)));
  });

  it('passes the program’s lines on under its name', async () => {
    const speaking = program("console.log('hello'); setInterval(() => undefined, 1000);");
    const child = superviseProgram(speaking, { name: 'worker', print });
    await until(() => printed.length > 0);
    await child.stop();
    expect(printed).toEqual(['worker: hello']);
  });
});

describe('runProgram', () => {
  it('answers what was written to standard output', async () => {
    const speaking = program("console.log('one'); console.log('two');");
    expect(await runProgram(speaking, { name: 'seed', print })).toEqual(['one', 'two']);
  });

  it('rejects when the program fails', async () => {
    const failing = program("console.error('no database'); process.exit(1);");
    await expect(runProgram(failing, { name: 'seed', print })).rejects.toThrow(/code 1/);
    expect(printed).toEqual(['seed: no database']);
  });
});
