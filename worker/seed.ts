/** Puts the demo into the database, once; writes its sign-ins as one JSON object a line. */
import { closeDatabase } from '../src/lib/server/db';
import { seedDemo } from '../src/lib/server/demo';

for (const signIn of await seedDemo()) process.stdout.write(`${JSON.stringify(signIn)}\n`);
await closeDatabase();
