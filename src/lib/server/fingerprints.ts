/** Fingerprints of stored molecules. They take milliseconds each, so workers write them after an upload, not during it. */
import { setImmediate as breathe } from 'node:timers/promises';
import { asc, eq, isNull } from 'drizzle-orm';
import { fingerprintOf } from '../engine';
import { db } from './db';
import { molecules } from './db/schema';

/**
 * Writes fingerprints of up to `limit` molecules that have none, the oldest first, and returns of how many; any number
 * of workers may do it at once. Searches find molecules without one too, only slower.
 */
export function fillFingerprints(limit: number): Promise<number> {
  return db.transaction(async (transaction) => {
    const rows = await transaction
      .select({ id: molecules.id, smiles: molecules.smiles })
      .from(molecules)
      .where(isNull(molecules.fingerprint))
      .orderBy(asc(molecules.createdAt))
      .limit(limit)
      // Weaker than an update's own lock, so that rows of batches can refer to the molecules meanwhile.
      .for('no key update', { skipLocked: true });
    for (const { id, smiles } of rows) {
      await breathe();
      const fingerprint = fingerprintOf(smiles);
      await transaction.update(molecules).set({ fingerprint }).where(eq(molecules.id, id));
    }
    return rows.length;
  });
}
