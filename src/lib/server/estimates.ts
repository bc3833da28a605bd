/** The likely price of a plan, before anything is queued. */
import { asc, eq } from 'drizzle-orm';
import { likelySeconds } from '../domain/cost';
import type { Plan } from '../domain/submission';
import { get } from './batches';
import { db } from './db';
import { entries, molecules } from './db/schema';
import type { Member } from './member';
import { planTasks } from './plans';
import { findStored, identityOf } from './results';

export interface Estimate {
  readonly tasks: number;
  /** Of these, the tasks whose answer the team has already. */
  readonly stored: number;
  /** Seconds of one core that the others are likely to take. */
  readonly seconds: number;
}

/** Prices a plan for a draft of the member's. */
export async function estimate(member: Member, batchId: string, plan: Plan): Promise<Estimate> {
  const batch = await get(member, batchId);
  const rows = await db
    .select({
      id: entries.id,
      chosenBonds: entries.chosenBonds,
      mapBonds: entries.mapBonds,
      moleculeId: molecules.id,
      rotors: molecules.rotors,
      atomCount: molecules.atomCount,
      hasGeometry: molecules.hasGeometry,
    })
    .from(entries)
    .innerJoin(molecules, eq(molecules.id, entries.moleculeId))
    .where(eq(entries.batchId, batch.id))
    .orderBy(asc(entries.position));
  const planned = rows.flatMap((row) => planTasks(row, plan).map((task) => ({ task, row })));
  const known = await findStored(
    db,
    planned.map(({ task }) => task),
  );
  const open = planned.filter(({ task }) => !known.has(identityOf(task)));
  const seconds = open.reduce((sum, { task, row }) => {
    const rotorCount = row.rotors.filter((rotor) => !rotor.terminal).length;
    const molecule = { atomCount: row.atomCount, rotorCount };
    const step = task.kind === 'map' ? Number(task.settings.step) : undefined;
    return sum + likelySeconds(task.kind, molecule, step === undefined ? {} : { step });
  }, 0);
  return { tasks: planned.length, stored: planned.length - open.length, seconds };
}
