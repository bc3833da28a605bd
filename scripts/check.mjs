/** Runs the static checks and says which passed: format, lint, types, and the doors between the rooms. */
import { spawn, spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { projectRoot } from './folders.mjs';

const checks = [
  { name: 'format', command: ['prettier', '--check', '--log-level=warn', '.'] },
  { name: 'lint', command: ['eslint', '--max-warnings=0', '.'] },
  // Types of the TypeScript sources and of the components, with Svelte's own warnings.
  {
    name: 'types',
    command: [
      'svelte-check',
      '--tsconfig',
      './tsconfig.json',
      '--output',
      'human',
      '--fail-on-warnings',
    ],
  },
  {
    name: 'dependency rules',
    command: ['depcruise', '--output-type=err', 'src', 'worker', 'scripts', 'tests'],
  },
];

/** Runs one check and keeps what it says until it has ended, so that checks side by side do not mix their lines. */
function runCheck({ name, command }) {
  return new Promise((resolve) => {
    const child = spawn('npx', ['--no-install', ...command], {
      cwd: projectRoot,
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    const said = [];
    for (const stream of [child.stdout, child.stderr])
      stream.on('data', (chunk) => said.push(chunk));
    const end = (ok) => {
      process.stdout.write(Buffer.concat(said));
      console.log(`${ok ? 'ok    ' : 'FAILED'} ${name}`);
      resolve(ok);
    };
    child.once('error', (error) => {
      said.push(Buffer.from(`${error.message}\n`));
      end(false);
    });
    child.once('close', (status) => end(status === 0));
  });
}

/** Runs every check, side by side, prints a line for each, and returns how many passed and failed. */
export async function runChecks() {
  // Writes the types of the routes, which the checks read.
  spawnSync('npx', ['--no-install', 'svelte-kit', 'sync'], { cwd: projectRoot, stdio: 'inherit' });
  const results = await Promise.all(checks.map(runCheck));
  const passed = results.filter(Boolean).length;
  return { passed, failed: results.length - passed };
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  process.exitCode = (await runChecks()).failed === 0 ? 0 : 1;
}
