/** The external programs of second opinions: wished for, never needed. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';

const PROGRAMS = [
  { name: 'xtb', path: process.env.WINDLASS_XTB || '/usr/bin/xtb' },
  { name: 'mopac', path: process.env.WINDLASS_MOPAC || '/usr/bin/mopac' },
];
/** An archive that does not answer must not keep the product from starting. */
const PATIENCE_MS = 240_000;

const isMissing = ({ path }) => !existsSync(path);
const namesOf = (programs) => programs.map(({ name }) => name).join(' and ');

/** Installs Debian's xtb and mopac where they are missing and this user may; what stays missing is said, and no more. */
export function installPrograms() {
  const missing = PROGRAMS.filter(isMissing);
  if (missing.length === 0) return;
  const packages = missing.map(({ name }) => name);
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const run = (...args) =>
    spawnSync('apt-get', args, { stdio: 'ignore', env, timeout: PATIENCE_MS }).status === 0;
  if (process.getuid?.() === 0 && existsSync('/usr/bin/apt-get')) {
    console.log(`Installing Debian's ${namesOf(missing)} …`);
    run('update', '-qq');
    // One by one, so that one that this Debian does not have keeps out no other.
    for (const name of packages) run('install', '-y', '--no-install-recommends', name);
  }
  const left = missing.filter(isMissing);
  if (left.length > 0) {
    console.log(
      `Second opinions go without ${namesOf(left)}; add them with\n  sudo apt-get install ${left.map(({ name }) => name).join(' ')}`,
    );
  }
}
