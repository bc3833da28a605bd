/** Molecules of a team: their structures, drawings and answers. */
import { and, desc, eq, inArray, lt, sql } from 'drizzle-orm';
import { atomLabel, drawMolecule, readMolecule, type Drawing, type Molecule } from '../engine';
import { db } from './db';
import { batches, entries, molecules, results } from './db/schema';
import { notFound, type InTeam, type Member } from './member';

/** A molecule of the member's team. */
export async function get(member: InTeam, moleculeId: string) {
  const [molecule] = await db
    .select()
    .from(molecules)
    .where(and(eq(molecules.id, moleculeId), eq(molecules.teamId, member.teamId)));
  return molecule ?? notFound('molecule');
}

/** The name under which a molecule was last submitted in its team, else its formula. */
export async function nameOf({
  id,
  formula,
}: Pick<typeof molecules.$inferSelect, 'id' | 'formula'>): Promise<string> {
  const [entry] = await db
    .select({ name: entries.name })
    .from(entries)
    .innerJoin(batches, eq(batches.id, entries.batchId))
    .where(eq(entries.moleculeId, id))
    .orderBy(desc(batches.submittedAt))
    .limit(1);
  return entry?.name ?? formula;
}

/** The engine's molecule of a stored structure; it was checked when it was stored. */
export function readStored({
  format,
  structure,
}: Pick<typeof molecules.$inferSelect, 'format' | 'structure'>): Molecule {
  return readMolecule(format === 'smiles' ? { smiles: structure } : { molfile: structure });
}

/** The structure drawing of a molecule, in the atom numbers of its results. */
export async function draw(member: Member, moleculeId: string): Promise<Drawing> {
  return drawMolecule(readStored(await get(member, moleculeId)));
}

/** A bond or torsion by its atoms as people read them: "C2–C3". */
export function bondName(molecule: Molecule, atoms: readonly number[]): string {
  return atoms.map((atom) => atomLabel(molecule.atomicNumbers[atom], atom)).join('–');
}

/** Forgets molecules that no row names any more, as those of discarded drafts; what was computed for one keeps it. */
export async function forgetUnused(): Promise<void> {
  const unused = db
    .select({ id: molecules.id })
    .from(molecules)
    .where(
      and(
        lt(molecules.createdAt, sql`now() - interval '1 day'`),
        sql`not exists (select 1 from ${entries} where ${entries.moleculeId} = ${molecules.id})`,
        sql`not exists (select 1 from ${results} where ${results.moleculeId} = ${molecules.id})`,
      ),
    )
    .for('update', { skipLocked: true });
  await db.delete(molecules).where(inArray(molecules.id, unused));
}
