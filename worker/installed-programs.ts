/** The external programs of this worker's machine, looked for once when it starts, and told to everybody. */
import { setTimeout as pause } from 'node:timers/promises';
import { programNames, type ProgramName } from '../src/lib/domain/second-opinions';
import { environment } from '../src/lib/server/environment';
import { log } from '../src/lib/server/log';
import { announce, withdraw } from '../src/lib/server/worker-programs';
import { findProgram } from './programs/find-programs';
import type { InstalledProgram } from './programs/program';

const ANNOUNCE_MS = 30_000;
const paths = { xtb: environment.WINDLASS_XTB, mopac: environment.WINDLASS_MOPAC };

export type InstalledPrograms = Partial<Record<ProgramName, InstalledProgram>>;

/** Looks for the programs; what is missing is logged, and nothing else depends on it. */
export async function findInstalled(): Promise<InstalledPrograms> {
  const installed: InstalledPrograms = {};
  for (const name of programNames) {
    const found = await findProgram(name, paths[name]);
    if ('missing' in found) log.info({ program: name, why: found.missing }, 'A program is missing');
    else installed[name] = found;
  }
  return installed;
}

/** Tells what this worker has for as long as it runs, and takes it back at its end. */
export async function keepAnnouncing(
  worker: string,
  installed: InstalledPrograms,
  signal: AbortSignal,
): Promise<void> {
  const found = programNames.flatMap((program) => {
    const version = installed[program]?.version;
    return version === undefined ? [] : [{ program, version }];
  });
  while (!signal.aborted) {
    await announce(worker, found).catch((error: unknown) =>
      log.warn({ error }, 'The programs could not be told; tried again'),
    );
    await pause(ANNOUNCE_MS, undefined, { signal }).catch(() => undefined);
  }
  await withdraw(worker).catch(() => undefined);
}
