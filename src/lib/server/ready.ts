/** Whether the database can be used right now. */
import { sql } from 'drizzle-orm';
import { db } from './db';
import { log } from './log';
import { users } from './db/schema';

const PATIENCE_MS = 3_000;

/** True when the database answers soon and has its tables. */
export async function isDatabaseReady(): Promise<boolean> {
  const tooLate = new Promise<never>((_, reject) => {
    setTimeout(
      () => reject(new Error('The database took too long to answer')),
      PATIENCE_MS,
    ).unref();
  });
  try {
    await Promise.race([
      db
        .select({ one: sql`1` })
        .from(users)
        .limit(1),
      tooLate,
    ]);
    return true;
  } catch (error) {
    log.warn({ error }, 'The database is not ready');
    return false;
  }
}
