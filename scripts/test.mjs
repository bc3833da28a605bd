/** `npm test`: installs what is missing, runs the static checks and every test, and sums all of it up in the last line. */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { runChecks } from './check.mjs';
import { projectRoot } from './folders.mjs';
import { installPackages } from './install.mjs';

/** Runs Vitest and returns its counts; a run that ends without a report counts as one failure. */
function runVitest(extraArguments) {
  const folder = mkdtempSync(join(tmpdir(), 'windlass-test-'));
  const report = join(folder, 'vitest.json');
  try {
    const { status } = spawnSync(
      'npx',
      [
        '--no-install',
        'vitest',
        'run',
        '--reporter=default',
        '--reporter=json',
        `--outputFile.json=${report}`,
        ...extraArguments,
      ],
      { cwd: projectRoot, stdio: 'inherit' },
    );
    const { numPassedTests, numFailedTests, numPendingTests, numTotalTestSuites } = JSON.parse(
      readFileSync(report, 'utf8'),
    );
    // A file that could not be loaded fails the run without failing a single test.
    const failed = status !== 0 && numFailedTests === 0 ? 1 : numFailedTests;
    return { passed: numPassedTests, failed, skipped: numPendingTests, suites: numTotalTestSuites };
  } catch (error) {
    console.error(error.message);
    return { passed: 0, failed: 1, skipped: 0, suites: 0 };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

await installPackages();
const checks = runChecks();
const tests = runVitest(process.argv.slice(2));
const passed = checks.passed + tests.passed;
const failed = checks.failed + tests.failed;
process.exitCode = failed === 0 && tests.passed > 0 ? 0 : 1;
const skipped = tests.skipped > 0 ? `, ${tests.skipped} skipped` : '';
console.log(`\n${passed} passed, ${failed} failed${skipped}`);
