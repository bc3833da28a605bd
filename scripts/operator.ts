/**
 * `npm run operator -- add address`, `remove address` or `list`: who looks after the machines. It works on the database
 * named by DATABASE_URL, or on this clone's own one while it runs.
 */
import { join } from 'node:path';
import { windlassFolder } from './folders.mjs';
import { runningUrl } from './postgres.mjs';
import { readSecrets } from './settings.mjs';

const USAGE = `Usage:
  npm run operator -- add ines@example.com       lets a person with an account open /operator
  npm run operator -- remove ines@example.com
  npm run operator -- list`;

/** Says it and ends with an exit code. */
function end(message: string, code: number): never {
  (code === 0 ? console.log : console.error)(message);
  process.exit(code);
}

function connectSettings(): void {
  const secrets = readSecrets() as Record<string, string>;
  const url =
    process.env['DATABASE_URL'] ??
    runningUrl(join(windlassFolder, 'postgres'), secrets['WINDLASS_POSTGRES_PASSWORD']);
  if (!url) end('The database does not run. Start the product first, or set DATABASE_URL.', 1);
  Object.assign(process.env, { AUTH_SECRET: secrets['AUTH_SECRET'], DATABASE_URL: url });
}

async function main(): Promise<string> {
  const [command, address = ''] = process.argv.slice(2);
  if (!['add', 'remove', 'list'].includes(command) || (command !== 'list' && !address)) {
    end(USAGE, 2);
  }
  connectSettings();
  // Loaded only now: the server's modules read their settings when they are loaded.
  const { listOperators, setOperator } = await import('../src/lib/server/operators');
  const { closeDatabase } = await import('../src/lib/server/db');
  try {
    if (command === 'list') return (await listOperators()).join('\n') || 'There is no operator.';
    const outcome = await setOperator(address, command === 'add');
    if (outcome === 'unknown') {
      return end(`Nobody has an account with the address ${address}. They sign up first.`, 1);
    }
    const is = command === 'add' ? 'is an operator' : 'is no operator';
    return outcome === 'changed' ? `${address} ${is} from now on.` : `${address} ${is} already.`;
  } finally {
    await closeDatabase();
  }
}

end(await main(), 0);
