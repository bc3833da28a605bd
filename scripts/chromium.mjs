/** The browser of the page tests: Debian's Chromium, or the one that WINDLASS_CHROMIUM names. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { StartError } from './settings.mjs';

const DEBIAN_CHROMIUM = '/usr/bin/chromium';
export const chromiumPath = process.env.WINDLASS_CHROMIUM || DEBIAN_CHROMIUM;

/** Installs Debian's Chromium where it is missing and this user may; else says what to do. */
export function installChromium() {
  if (existsSync(chromiumPath)) return;
  const command = 'apt-get install -y --no-install-recommends chromium';
  const advice = `Install it with\n  sudo ${command}\nor set WINDLASS_CHROMIUM to the path of one.`;
  if (process.getuid?.() !== 0 || chromiumPath !== DEBIAN_CHROMIUM) {
    throw new StartError(`The page tests need Chromium at ${chromiumPath}. ${advice}`);
  }
  console.log("Installing Debian's Chromium …");
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  for (const line of ['apt-get update -qq', command]) {
    spawnSync(line, { shell: true, stdio: ['ignore', 'ignore', 'inherit'], env });
  }
  if (!existsSync(chromiumPath)) throw new StartError(`Chromium could not be installed. ${advice}`);
}
