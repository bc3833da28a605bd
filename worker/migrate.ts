/** Brings the database to the state of this build, then ends; run before web and worker. */
import { fileURLToPath } from 'node:url';
import { migrateDatabase } from '../src/lib/server/db/migrate';
import { environment } from '../src/lib/server/environment';

// The SQL lies beside the worker's folder, in the sources as in a build.
const folder = fileURLToPath(new URL('../drizzle', import.meta.url));
await migrateDatabase(environment.DATABASE_URL, folder);
