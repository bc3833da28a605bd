/** Molecules of a team: their structures, drawings and answers. */
import { and, desc, eq } from 'drizzle-orm';
import { drawMolecule, readMolecule, type Drawing, type Molecule } from '../engine';
import { db } from './db';
import { batches, entries, molecules } from './db/schema';
import { notFound, type Member } from './member';

/** A molecule of the member's team. */
export async function get(member: Member, moleculeId: string) {
  const [molecule] = await db
    .select()
    .from(molecules)
    .where(and(eq(molecules.id, moleculeId), eq(molecules.teamId, member.teamId)));
  return molecule ?? notFound('molecule');
}

/** The name under which a molecule was last submitted in its team, else its formula. */
export async function nameOf(
  molecule: Pick<typeof molecules.$inferSelect, 'id' | 'formula'>,
): Promise<string> {
  const [entry] = await db
    .select({ name: entries.name })
    .from(entries)
    .innerJoin(batches, eq(batches.id, entries.batchId))
    .where(eq(entries.moleculeId, molecule.id))
    .orderBy(desc(batches.submittedAt))
    .limit(1);
  return entry?.name ?? molecule.formula;
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
