/** Which of the external programs this machine has, asked once when the worker starts. */
import { access, constants } from 'node:fs/promises';
import type { InstalledProgram } from './program';
import { runProgram } from './run-program';

const SECONDS = 20;

/** How each program tells its version. */
const tellsVersion = {
  xtb: /xtb version (\S+)/,
  mopac: /MOPAC version (\S+)/i,
} as const;
export type ProgramName = keyof typeof tellsVersion;

/** The program at a path, or why it cannot be used. */
export async function findProgram(
  name: ProgramName,
  path: string,
): Promise<InstalledProgram | { readonly missing: string }> {
  try {
    await access(path, constants.X_OK);
    const { output, errors } = await runProgram({
      path,
      args: ['--version'],
      seconds: SECONDS,
      signal: new AbortController().signal,
    });
    const version = tellsVersion[name].exec(output + errors)?.[1];
    return version === undefined
      ? { missing: `${path} does not tell its version` }
      : { path, version };
  } catch (error) {
    return { missing: (error as Error).message };
  }
}
