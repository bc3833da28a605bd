/**
 * Builds web and worker when the sources are newer than the build. Each state of the sources has a build folder of its
 * own, so that a product that runs keeps its files while another state is built beside it.
 */
import { createHash } from 'node:crypto';
import {
  cpSync,
  existsSync,
  readFileSync,
  readdirSync,
  rmSync,
  statSync,
  utimesSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { projectRoot } from './folders.mjs';
import { withLock } from './lock.mjs';
import { runProgram } from './processes.mjs';

const SOURCES = [
  'src',
  'worker',
  'static',
  'drizzle',
  'package-lock.json',
  'svelte.config.js',
  'tailwind.config.ts',
  'tsconfig.json',
  'vite.config.ts',
  'vite.worker.config.ts',
];
/** SvelteKit loads the server once while building, where settings are read but nothing is connected. */
const BUILD_SETTINGS = {
  NODE_ENV: 'production',
  DATABASE_URL: 'postgres://nobody@127.0.0.1:1/none',
  AUTH_SECRET: 'only while building, where nothing is signed',
};
const KEPT_BUILDS = 3;
const builds = join(projectRoot, 'build');

function listFiles(path) {
  if (!statSync(path).isDirectory()) return [path];
  return readdirSync(path, { withFileTypes: true })
    .flatMap((entry) => listFiles(join(path, entry.name)))
    .filter((file) => !file.endsWith('.test.ts'))
    .sort();
}

function hashSources() {
  const hash = createHash('sha256');
  for (const source of SOURCES) {
    for (const file of listFiles(join(projectRoot, source))) {
      hash.update(file.slice(projectRoot.length)).update('\0').update(readFileSync(file));
    }
  }
  return hash.digest('hex').slice(0, 12);
}

async function runVite(folder, config) {
  const args = ['node_modules/vite/bin/vite.js', 'build', '--logLevel=error', ...config];
  const env = { ...process.env, ...BUILD_SETTINGS, WINDLASS_BUILD_FOLDER: folder };
  // Bundlers talk much about what is well; it is shown when something is not.
  const lines = [];
  const print = (name, line) => lines.push(line);
  try {
    await runProgram({ args, env }, { name: 'build', print });
  } catch (error) {
    console.error(lines.join('\n'));
    throw error;
  }
}

function removeOldBuilds() {
  const byAge = readdirSync(builds)
    .map((name) => ({ path: join(builds, name), at: statSync(join(builds, name)).mtimeMs }))
    .sort((a, b) => b.at - a.at);
  for (const { path } of byAge.slice(KEPT_BUILDS)) rmSync(path, { recursive: true, force: true });
}

/** Makes sure that there is a build of the present sources, and returns its folder. */
export function buildProduct() {
  return withLock('build', async () => {
    const name = hashSources();
    const folder = join(builds, name);
    const stamp = join(folder, 'complete');
    if (!existsSync(stamp)) {
      console.log('Building (about a minute) …');
      rmSync(folder, { recursive: true, force: true });
      await runVite(join('build', name), []);
      await runVite(join('build', name), ['--config', 'vite.worker.config.ts']);
      cpSync(join(projectRoot, 'drizzle'), join(folder, 'drizzle'), { recursive: true });
      writeFileSync(stamp, '');
    }
    const now = new Date();
    utimesSync(folder, now, now);
    removeOldBuilds();
    return folder;
  });
}
