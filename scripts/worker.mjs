/** `npm run worker`: one worker more, on this machine, for the database named by DATABASE_URL; until Ctrl-C. */
import { join } from 'node:path';
import { buildProduct } from './build.mjs';
import { installPackages } from './install.mjs';
import { installPrograms } from './programs.mjs';

const missing = ['DATABASE_URL', 'AUTH_SECRET'].filter((name) => !process.env[name]);
if (missing.length > 0) {
  console.error(
    `Set ${missing.join(' and ')} to what the product itself has (.windlass/secrets.env there), like\n` +
      '  DATABASE_URL=postgres://… AUTH_SECRET=… npm run worker',
  );
  process.exit(1);
}
await installPackages();
installPrograms();
const folder = await buildProduct();
const { superviseProgram } = await import('./processes.mjs');
const { printLine } = await import('./log-lines.mjs');
// Without the web's mail server it would hand letters in nowhere.
const WINDLASS_WORKER_CHORES = process.env.WINDLASS_SMTP_URL ? 'on' : 'off';
const env = { NODE_ENV: 'production', WINDLASS_WORKER_CHORES, ...process.env };
const args = [join(folder, 'worker', 'main.js')];
const options = { name: 'worker', print: printLine, mayEnd: true };
const worker = superviseProgram({ args, env }, options);
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
  process.once(signal, () => void worker.stop().then(() => process.exit(0)));
}
console.log('The worker runs; Ctrl-C stops it.');
