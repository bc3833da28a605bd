/** `npm run worker`: one worker more, on this machine, for the database named by DATABASE_URL. */
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { buildProduct } from './build.mjs';
import { installPackages } from './install.mjs';

await installPackages();
const folder = await buildProduct();
const worker = spawn(process.execPath, [join(folder, 'worker', 'main.js')], { stdio: 'inherit' });
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => worker.kill(signal));
worker.on('exit', (code) => {
  process.exitCode = code ?? 1;
});
