/**
 * `npm test`: installs what is missing, runs the static checks and every test, and sums all of it up in the last line.
 * Arguments choose test files by a part of their path.
 */
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { runChecks } from './check.mjs';
import { installChromium } from './chromium.mjs';
import { projectRoot } from './folders.mjs';
import { installPackages } from './install.mjs';
import { installPostgres } from './postgres.mjs';
import { installPrograms } from './programs.mjs';

/**
 * Runs a test runner that writes a JSON report; a run that ends without one counts as a failure. What a quiet runner says
 * is printed when it has ended, so that runners side by side do not mix their lines.
 */
async function runRunner({ name, command, env, count, isQuiet = false }) {
  const folder = mkdtempSync(join(tmpdir(), 'windlass-test-'));
  const report = join(folder, 'report.json');
  try {
    const child = spawn('npx', ['--no-install', ...command(report)], {
      cwd: projectRoot,
      stdio: isQuiet ? ['ignore', 'pipe', 'pipe'] : 'inherit',
      env: { ...process.env, ...env?.(report) },
    });
    const said = [];
    for (const stream of [child.stdout, child.stderr])
      stream?.on('data', (chunk) => said.push(chunk));
    const [status] = await once(child, 'close');
    process.stdout.write(Buffer.concat(said));
    const counts = count(JSON.parse(readFileSync(report, 'utf8')));
    // A file that could not be loaded fails the run without failing a single test.
    return status !== 0 && counts.failed === 0 ? { ...counts, failed: 1 } : counts;
  } catch (error) {
    console.error(`${name} left no report: ${error.message}`);
    return { passed: 0, failed: 1, skipped: 0 };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

const vitest = (files) => ({
  name: 'Vitest',
  command: (report) => [
    'vitest',
    'run',
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${report}`,
    ...(files.length > 0 ? ['--passWithNoTests', ...files] : []),
  ],
  count: (report) => ({
    passed: report.numPassedTests,
    failed: report.numFailedTests,
    skipped: report.numPendingTests,
  }),
});

const playwright = (files) => ({
  name: 'Playwright',
  isQuiet: true,
  command: () => ['playwright', 'test', '--reporter=list,json', ...files],
  env: (report) => ({ PLAYWRIGHT_JSON_OUTPUT_NAME: report }),
  // A test that passes only at its second try counts as failed: it hides something.
  count: ({ stats }) => ({
    passed: stats.expected,
    failed: stats.unexpected + stats.flaky,
    skipped: stats.skipped,
  }),
});

const files = process.argv.slice(2);
/** Without a chosen page test the product need not be built and started. */
const hasPageTests =
  files.length === 0 ||
  readdirSync(join(projectRoot, 'tests/pages')).some((name) =>
    files.some((file) => `tests/pages/${name}`.includes(file)),
  );
await installPackages();
installPostgres();
installPrograms();
installChromium();
const nothing = { passed: 0, failed: 0, skipped: 0 };
const checked = { ...(await runChecks()), skipped: 0 };
console.log('Tests of the engine and of flows begin, and those in a browser beside them …');
// Much of either is waiting, so both together take little longer than one of them.
const tested = await Promise.all([
  runRunner(vitest(files)),
  hasPageTests ? runRunner(playwright(files)) : nothing,
]);
const results = [checked, ...tested];
const sum = (name) => results.reduce((total, result) => total + result[name], 0);
const skipped = sum('skipped') > 0 ? `, ${sum('skipped')} skipped` : '';
process.exitCode = sum('failed') === 0 && results[1].passed + results[2].passed > 0 ? 0 : 1;
console.log(`\n${sum('passed')} passed, ${sum('failed')} failed${skipped}`);
