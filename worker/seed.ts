/** Puts the demo into the database, once; writes its sign-ins as one JSON object a line. */
import { registerChemistryResources } from '../src/lib/server/chemistry-resources';
import { closeDatabase } from '../src/lib/server/db';
import { seedDemo } from '../src/lib/server/demo';
import { stopQueue } from '../src/lib/server/queue';

registerChemistryResources();
for (const signIn of await seedDemo()) process.stdout.write(`${JSON.stringify(signIn)}\n`);
await stopQueue();
await closeDatabase();
