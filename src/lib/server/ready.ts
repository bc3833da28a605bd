/** Whether the database can be used right now by this build. */
import { sql } from 'drizzle-orm';
import journal from '../../../drizzle/meta/_journal.json';
import { db } from './db';
import { log } from './log';

const PATIENCE_MS = 2_000;
/** The last migration that this build knows, as the migration program writes it down. */
const needed = Math.max(...journal.entries.map(({ when }) => when));

/** 'ready' when the database answers soon and has every migration of this build. */
export async function readDatabaseState(): Promise<'ready' | 'away' | 'not migrated'> {
  let timer: NodeJS.Timeout | undefined;
  const tooLate = new Promise<never>((_, reject) => {
    timer = setTimeout(
      () => reject(new Error('The database took too long to answer')),
      PATIENCE_MS,
    );
  });
  try {
    return await Promise.race([readMigrations(), tooLate]);
  } catch (error) {
    log.warn({ error }, 'The database is not ready');
    return 'away';
  } finally {
    clearTimeout(timer);
  }
}

async function readMigrations(): Promise<'ready' | 'not migrated'> {
  const [{ exists }] = await db.execute<{ exists: boolean }>(
    sql`select to_regclass('drizzle.__drizzle_migrations') is not null as exists`,
  );
  if (!exists) return 'not migrated';
  // A database that is ahead is fine: while a newer build starts, this one still answers.
  const [{ last }] = await db.execute<{ last: string | null }>(
    sql`select max(created_at) as last from drizzle.__drizzle_migrations`,
  );
  return Number(last) >= needed ? 'ready' : 'not migrated';
}
