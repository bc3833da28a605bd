/** The external programs of this worker's machine, looked for once when it starts. */
import {
  programNames,
  type InstalledVersions,
  type ProgramName,
} from '../src/lib/domain/second-opinions';
import { environment } from '../src/lib/server/environment';
import { log } from '../src/lib/server/log';
import { findProgram } from './programs/find-programs';
import type { InstalledProgram } from './programs/program';

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

/** What a worker tells of its programs. */
export function versionsOf(installed: InstalledPrograms): InstalledVersions {
  return Object.fromEntries(
    programNames.flatMap((name) => {
      const version = installed[name]?.version;
      return version === undefined ? [] : [[name, version]];
    }),
  );
}
