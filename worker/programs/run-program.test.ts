/** Limits, endings and traces of external programs, with small programs made for it. */
import { chmodSync, existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { until } from '../../tests/support/until';
import { ProgramUnavailable, runProgram } from './run-program';

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'programs-test-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

let count = 0;
/** A program of one shell script. */
function program(script: string): string {
  const path = join(folder, `program-${(count += 1)}`);
  writeFileSync(path, `#!/bin/sh\n${script}\n`);
  chmodSync(path, 0o755);
  return path;
}

const never = new AbortController().signal;
const usual = { args: [], seconds: 20, signal: never };
/** Whether a process runs; one that ended but was not waited for yet does not. */
function isAlive(pid: number): boolean {
  try {
    return !readFileSync(`/proc/${pid}/stat`, 'utf8').includes(') Z ');
  } catch {
    return false;
  }
}

describe('an external program', () => {
  it('runs in a private folder with its files, which is gone afterwards', async () => {
    const path = program('pwd; stat -c %a .; cat given; echo made > made; echo aside >&2; exit 3');
    const run = await runProgram({
      ...usual,
      path,
      files: { given: 'laid in\n' },
      reads: ['made', 'not there'],
    });
    const [where, mode, given] = run.output.split('\n');
    expect({ mode, given }).toEqual({ mode: '700', given: 'laid in' });
    expect(run).toMatchObject({
      exitCode: 3,
      stopped: null,
      errors: 'aside\n',
      files: { made: 'made\n' },
    });
    expect(run.files).not.toHaveProperty('not there');
    expect(existsSync(where)).toBe(false);
  });

  it('sees nothing of the worker’s own environment, and one thread', async () => {
    const run = await runProgram({ ...usual, path: program('env') });
    expect(run.output).toContain('OMP_NUM_THREADS=1');
    expect(run.output).not.toMatch(/DATABASE_URL|AUTH_SECRET/);
  });

  it('takes arguments as they are, since no shell reads them', async () => {
    const run = await runProgram({ ...usual, path: '/bin/echo', args: ['$HOME; ls *'] });
    expect(run.output).toBe('$HOME; ls *\n');
  });

  it('is ended with all it started when its time is over', async () => {
    const path = program('sleep 600 & echo $!; wait');
    const run = await runProgram({ ...usual, path, seconds: 0.5 });
    expect(run.stopped).toBe('it took longer than 0.5 s');
    await until('the grandchild to end', async () => !isAlive(Number(run.output)));
  });

  it('is ended with all it started when it is cancelled, and leaves no folder', async () => {
    const mark = join(folder, 'started');
    const controller = new AbortController();
    const path = program(`pwd > ${mark}.where; sleep 600 & echo $! > ${mark}; wait`);
    const running = runProgram({ ...usual, path, signal: controller.signal });
    const pid = await until(
      'the program to start',
      async () => existsSync(mark) && Number(readFileSync(mark, 'utf8')),
    );
    controller.abort(new Error('nobody wants it'));
    await expect(running).rejects.toThrow('nobody wants it');
    await until('the grandchild to end', async () => !isAlive(pid));
    expect(existsSync(readFileSync(`${mark}.where`, 'utf8').trim())).toBe(false);
  });

  it('is ended when it writes without end', async () => {
    const run = await runProgram({ ...usual, path: program('yes') });
    expect(run.stopped).toBe('it wrote without end');
    expect(run.output.length).toBeLessThanOrEqual(32 * 1024 * 1024);
  });

  it('has limits of memory and file size', async () => {
    const { output } = await runProgram({
      ...usual,
      path: program('ulimit -v; ulimit -f; ulimit -c'),
    });
    const [memory, file, core] = output.split('\n').map(Number);
    expect(memory).toBe(4096 * 1024);
    expect(file).toBeGreaterThan(0);
    expect(core).toBe(0);
  });

  it('that is not there is the machine’s fault, not the molecule’s', async () => {
    await expect(runProgram({ ...usual, path: join(folder, 'nothing') })).rejects.toThrow(
      ProgramUnavailable,
    );
  });

  it('says so when the temporary folder is full', async () => {
    // The kernel answers every write to /dev/full as a full disk would.
    const path = program('cat /etc/hostname /etc/passwd > /dev/full');
    await expect(runProgram({ ...usual, path })).rejects.toThrow(/temporary folder .* is full/);
  });
});
