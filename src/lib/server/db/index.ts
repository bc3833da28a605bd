/** The one connection pool of a process. */
import { drizzle, type PostgresJsDatabase } from 'drizzle-orm/postgres-js';
import postgres from 'postgres';
import { environment } from '../environment';
import * as schema from './schema';

export type Database = PostgresJsDatabase<typeof schema>;
/** What runs a query: the pool, or a transaction on it. */
export type Executor = Database | Parameters<Parameters<Database['transaction']>[0]>[0];

/** The driver itself, for LISTEN and for streaming reads. */
export const client = postgres(environment.DATABASE_URL, {
  max: environment.WINDLASS_DATABASE_POOL,
  onnotice: () => undefined,
});

export const db: Database = drizzle(client, { schema });

/** Closes every socket, so that the process can end. */
export function closeDatabase(): Promise<void> {
  return client.end({ timeout: 5 });
}
