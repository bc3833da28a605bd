/** Runs the static checks and says which passed: format, lint, types, and the doors between the rooms. */
import { spawnSync } from 'node:child_process';
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

/** Runs every check, prints a line for each, and returns how many passed and failed. */
export function runChecks() {
  // Writes the types of the routes, which the checks read.
  spawnSync('npx', ['--no-install', 'svelte-kit', 'sync'], { cwd: projectRoot, stdio: 'inherit' });
  const counts = { passed: 0, failed: 0 };
  for (const { name, command } of checks) {
    const { status } = spawnSync('npx', ['--no-install', ...command], {
      cwd: projectRoot,
      stdio: 'inherit',
    });
    console.log(`${status === 0 ? 'ok    ' : 'FAILED'} ${name}`);
    if (status === 0) counts.passed += 1;
    else counts.failed += 1;
  }
  return counts;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  process.exitCode = runChecks().failed === 0 ? 0 : 1;
}
