/** The worker: connects to the database and performs tasks until it is told to stop. */
import { client, closeDatabase } from '../src/lib/server/db';
import { log } from '../src/lib/server/log';

await client`select 1`;
log.info('The worker is connected');
const waiting = setInterval(() => undefined, 60_000);

for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.once(signal, () => {
    clearInterval(waiting);
    void closeDatabase();
  });
}
