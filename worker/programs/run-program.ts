/**
 * Runs an external program as a child process: without a shell, in a private folder that is always removed, as a
 * process group of its own, with limits of time, memory, file size and output.
 */
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { constants, setPriority, tmpdir } from 'node:os';
import { join } from 'node:path';

/** Both belong to Debian's util-linux, which is always there: limits, and an end together with the worker. */
export const LIMITER = '/usr/bin/prlimit';
const FOLLOWER = '/usr/bin/setpriv';

const MEGABYTE = 1024 * 1024;
const MEMORY_LIMIT = 4096 * MEGABYTE;
/** Deep stacks of arrays are these programs' habit. */
const STACK_LIMIT = 1024 * MEGABYTE;
const FILE_LIMIT = 256 * MEGABYTE;
/** Most text that is kept of one stream, and most that is read of one file. */
const TEXT_LIMIT = 32 * MEGABYTE;
/** External programs give way to the computing threads, whose work people wait for first. */
const NICENESS = constants.priority.PRIORITY_BELOW_NORMAL;

/** The machine is at fault, not the molecule: trying again, here or elsewhere, may help. */
export class ProgramUnavailable extends Error {}

export interface ProgramRun {
  readonly path: string;
  readonly args: readonly string[];
  /** Files laid into the folder beforehand, by name. */
  readonly files?: Readonly<Record<string, string>>;
  /** Files read afterwards, by name; those that are not there are left out. */
  readonly reads?: readonly string[];
  /** Longest time, s. */
  readonly seconds: number;
  readonly signal: AbortSignal;
}

export interface ProgramOutput {
  /** 0 when the program ended by itself and well. */
  readonly exitCode: number | null;
  /** Why it was ended before it was through, in words; null when it ended by itself. */
  readonly stopped: string | null;
  readonly output: string;
  readonly errors: string;
  readonly files: Readonly<Record<string, string>>;
}

/**
 * Runs a program to its end. Rejects with the signal's reason when aborted, and with ProgramUnavailable when the
 * program cannot be started or the temporary folder cannot be written.
 */
export async function runProgram(run: ProgramRun): Promise<ProgramOutput> {
  run.signal.throwIfAborted();
  const folder = await ownFolder();
  try {
    for (const [name, text] of Object.entries(run.files ?? {})) {
      await writeFile(join(folder, name), text, { mode: 0o600 }).catch(folderFailed);
    }
    const ended = await runIn(folder, run);
    run.signal.throwIfAborted();
    if (/No space left on device/.test(ended.errors + ended.output)) {
      throw new ProgramUnavailable(`The temporary folder ${tmpdir()} is full.`);
    }
    return { ...ended, files: await readFiles(folder, run.reads ?? []) };
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

/** A folder that only this user can enter (mkdtemp makes it 0700). */
async function ownFolder(): Promise<string> {
  return mkdtemp(join(tmpdir(), 'windlass-')).catch(folderFailed);
}

function folderFailed(error: unknown): never {
  throw new ProgramUnavailable(
    `The temporary folder ${tmpdir()} cannot be written: ${(error as Error).message}`,
  );
}

async function readFiles(folder: string, names: readonly string[]) {
  const files: Record<string, string> = {};
  for (const name of names) {
    const path = join(folder, name);
    const { size } = await stat(path).catch(() => ({ size: Infinity }));
    if (size <= TEXT_LIMIT) files[name] = await readFile(path, 'utf8');
  }
  return files;
}

async function runIn(
  folder: string,
  { path, args, seconds, signal }: ProgramRun,
): Promise<Omit<ProgramOutput, 'files'>> {
  const limits = [
    `--as=${MEMORY_LIMIT}`,
    `--stack=${STACK_LIMIT}:`,
    `--fsize=${FILE_LIMIT}`,
    `--cpu=${Math.ceil(seconds) + 10}`,
    '--core=0',
  ];
  const child = spawn(
    FOLLOWER,
    ['--pdeathsig', 'KILL', '--', LIMITER, ...limits, '--', path, ...args],
    {
      cwd: folder,
      // A process group of its own, so that whatever it starts ends with it.
      detached: true,
      stdio: ['ignore', 'pipe', 'pipe'],
      env: {
        PATH: '/usr/bin:/bin',
        HOME: folder,
        TMPDIR: folder,
        LC_ALL: 'C',
        OMP_NUM_THREADS: '1',
        OMP_STACKSIZE: '256M',
        OPENBLAS_NUM_THREADS: '1',
        MKL_NUM_THREADS: '1',
      },
    },
  );
  let stopped: string | null = null;
  const endGroup = () => {
    if (child.pid === undefined) return;
    try {
      process.kill(-child.pid, 'SIGKILL');
    } catch {
      // The whole group has ended already.
    }
  };
  const stop = (why: string) => {
    stopped ??= why;
    endGroup();
  };
  const onAbort = () => stop('it was cancelled');
  signal.addEventListener('abort', onAbort, { once: true });
  const timer = setTimeout(() => stop(`it took longer than ${seconds} s`), seconds * 1000);
  const output = collect(child.stdout, () => stop('it wrote without end'));
  const errors = collect(child.stderr, () => stop('it wrote without end'));
  try {
    if (child.pid !== undefined) giveWay(child.pid);
    const [exitCode] = (await once(child, 'close')) as [number | null];
    // prlimit and setpriv end with these when what they should start is not there or may not be started.
    if (stopped === null && (exitCode === 126 || exitCode === 127)) {
      throw new ProgramUnavailable(`${path} could not be started: ${errors().trim()}`);
    }
    return { exitCode, stopped, output: output(), errors: errors() };
  } catch (error) {
    if (error instanceof ProgramUnavailable) throw error;
    throw new ProgramUnavailable(`${path} could not be started: ${(error as Error).message}`);
  } finally {
    clearTimeout(timer);
    signal.removeEventListener('abort', onAbort);
    endGroup();
  }
}

function giveWay(pid: number): void {
  try {
    setPriority(pid, NICENESS);
  } catch {
    // It has ended already, or this machine does not allow it; the result is the same.
  }
}

/** Keeps what a stream says, up to the limit. */
function collect(stream: NodeJS.ReadableStream, tooMuch: () => void): () => string {
  const chunks: Buffer[] = [];
  let length = 0;
  stream.on('data', (chunk: Buffer) => {
    length += chunk.length;
    if (length > TEXT_LIMIT) tooMuch();
    else chunks.push(chunk);
  });
  return () => Buffer.concat(chunks).toString('utf8');
}
