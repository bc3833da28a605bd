/** Runs the static checks and says which passed: format, lint, types, and the doors between the rooms. */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { projectRoot } from './folders.mjs';

const checks = [
  { name: 'format', command: ['prettier', '--check', '--log-level=warn', '.'] },
  { name: 'lint', command: ['eslint', '--max-warnings=0', '.'] },
  { name: 'types', command: ['tsc', '--noEmit'] },
  {
    name: 'dependency rules',
    command: ['depcruise', '--output-type=err', 'src', 'scripts', 'tests'],
  },
];

/** Runs every check, prints a line for each, and returns how many passed and failed. */
export function runChecks() {
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
