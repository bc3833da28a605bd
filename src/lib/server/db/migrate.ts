/** Brings the database's tables to the state of drizzle/. */
import { drizzle } from 'drizzle-orm/postgres-js';
import { migrate } from 'drizzle-orm/postgres-js/migrator';
import postgres from 'postgres';

/** Any number that no other program in this database uses: only one process migrates at a time. */
const MIGRATION_LOCK = 4_810_001;

/** Runs the migrations of a folder that the database does not have yet; waits while another process does so. */
export async function migrateDatabase(databaseUrl: string, folder: string): Promise<void> {
  // One connection, because the lock belongs to a connection and ends with it.
  const connection = postgres(databaseUrl, { max: 1, onnotice: () => undefined });
  try {
    await connection`select pg_advisory_lock(${MIGRATION_LOCK})`;
    // Trigram indexes find parts of names; the extension is trusted, so the database's owner may create it.
    await connection`create extension if not exists pg_trgm`;
    await migrate(drizzle(connection), { migrationsFolder: folder });
  } finally {
    await connection.end();
  }
}
