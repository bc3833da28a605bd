/** A throw-away PostgreSQL cluster for one test run, made for speed; what killed runs left behind is removed. */
import { randomBytes } from 'node:crypto';
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { cloneName, windlassFolder } from './folders.mjs';
import { isAlive } from './lock.mjs';
import { installPostgres, openCluster, removeCluster } from './postgres.mjs';
import { findFreePort } from './settings.mjs';

const PREFIX = 'test-postgres-';

/** Tests may lose their data in a crash of the machine; waiting for the disk would only make them slow. */
const FAST = [
  'fsync=off',
  'synchronous_commit=off',
  'full_page_writes=off',
  'max_connections=200',
  'shared_buffers=64MB',
];

function removeLeftOvers() {
  for (const place of [windlassFolder, `/var/lib/windlass-${cloneName}`]) {
    const names = existsSync(place) ? readdirSync(place) : [];
    for (const name of names.filter((each) => each.startsWith(PREFIX))) {
      if (!isAlive(Number(name.slice(PREFIX.length)))) removeCluster(join(windlassFolder, name));
    }
  }
}

/** Starts a cluster that belongs to this process; `remove` stops it and deletes its data. */
export async function startTestCluster() {
  installPostgres();
  removeLeftOvers();
  const folder = join(windlassFolder, `${PREFIX}${process.pid}`);
  const cluster = openCluster({
    folder,
    port: await findFreePort(),
    adminPassword: randomBytes(12).toString('hex'),
    password: randomBytes(12).toString('hex'),
    options: FAST,
  });
  return { ...cluster, remove: () => removeCluster(folder) };
}
