/** What the page of a molecule shows, in the order it is read: answers first, evidence after. */
import { and, count, desc, eq } from 'drizzle-orm';
import type { Result } from '../engine';
import { atomLabel, drawMolecule, writeMolfile, type Molecule } from '../engine';
import { readAnswers, resultIdsOf, type Answer, type StoredProfile } from './answers';
import { db } from './db';
import { batches, entries, tasks } from './db/schema';
import { notFound, type Member } from './member';
import * as molecules from './molecules';

/** A bond by its atoms as people read them: "C2–C3". */
function bondName(molecule: Molecule, atoms: readonly number[]): string {
  return atoms.map((atom) => atomLabel(molecule.atomicNumbers[atom], atom)).join('–');
}

/** Everything the page needs but the geometries, which it asks for when they are looked at. */
export async function load(member: Member, moleculeId: string) {
  const stored = await molecules.get(member, moleculeId);
  const molecule = molecules.readStored(stored);
  const mentions = await db
    .select({ name: entries.name, batchId: batches.id, batchName: batches.name })
    .from(entries)
    .innerJoin(batches, eq(batches.id, entries.batchId))
    .where(and(eq(entries.moleculeId, stored.id), eq(batches.teamId, member.teamId)))
    .orderBy(desc(batches.submittedAt))
    .limit(20);
  const open = await db
    .select({ kind: tasks.kind, state: tasks.state, tasks: count() })
    .from(tasks)
    .innerJoin(entries, eq(entries.id, tasks.entryId))
    .where(eq(entries.moleculeId, stored.id))
    .groupBy(tasks.kind, tasks.state);
  const answers = await readAnswers(await resultIdsOf(member, stored.id), stored.atomCount);
  const of = (kind: Answer['kind']) => answers.filter((answer) => answer.kind === kind);
  return {
    id: stored.id,
    name: mentions[0]?.name ?? stored.formula,
    smiles: stored.smiles,
    formula: stored.formula,
    atomCount: stored.atomCount,
    drawing: drawMolecule(molecule),
    batches: mentions.map(({ batchId, batchName }) => ({ id: batchId, name: batchName })),
    tasks: open,
    conformers: of('conformers').map((answer) => describeConformers(answer)),
    scans: of('scan').flatMap((answer) =>
      answer.profiles.map((profile) => describeScan(molecule, answer, profile)),
    ),
    conjugation: of('conjugation').map((answer) => describeConjugation(molecule, answer)),
    strain: of('strain').map((answer) => describeStrain(molecule, answer)),
  };
}

/** What every answer says of where it came from. */
function provenance({ id, model, engineVersion, settings, seconds, warnings }: Answer) {
  return { id, model, engineVersion, settings, seconds, warnings };
}

function describeConformers(answer: Answer) {
  return {
    ...provenance(answer),
    complete: answer.details.complete as boolean,
    window: answer.settings.window as number,
    temperature: answer.settings.temperature as number,
    rows: answer.conformers.map(({ coordinates: _coordinates, ...conformer }) => conformer),
  };
}

function describeScan(molecule: Molecule, answer: Answer, profile: StoredProfile) {
  const details = answer.details as Pick<
    Result<'scan'>,
    'basins' | 'crossings' | 'interconversion' | 'fourier' | 'complete' | 'temperature' | 'symmetry'
  >;
  return {
    ...provenance(answer),
    profileId: profile.id,
    torsion: profile.torsion,
    name: bondName(molecule, profile.torsion),
    bond: bondName(molecule, profile.torsion.slice(1, 3)),
    relaxed: profile.relaxed,
    points: profile.points.map(({ angle, relative }) => ({ angle, relative })),
    stationary: profile.stationary.map(({ coordinates: _coordinates, ...point }) => point),
    ...details,
  };
}

function describeConjugation(molecule: Molecule, answer: Answer) {
  const { bonds } = answer.details as Pick<Result<'conjugation'>, 'bonds'>;
  return {
    ...provenance(answer),
    temperature: answer.settings.temperature as number,
    bonds: bonds.map((bond) => ({
      name: bondName(molecule, bond.bond),
      kind: bond.kind,
      inRing: bond.inRing,
      twist: bond.twist,
      difference: bond.difference,
      sCisFraction: bond.sCisFraction,
      planarSCisCost: bond.planarSCisCost,
      barrier: bond.barrier,
      meanOverlap: bond.meanOverlap,
    })),
  };
}

function describeStrain(molecule: Molecule, answer: Answer) {
  const details = answer.details as Omit<
    Result<'strain'>,
    'molfile' | 'smiles' | 'warnings' | 'provenance'
  >;
  return {
    ...provenance(answer),
    strain: details.strain,
    complete: details.complete,
    largestDisplacement: details.largestDisplacement,
    torsions: details.torsions.map(({ bond, angle, strain, preferredAngle }) => ({
      name: bondName(molecule, bond),
      angle,
      strain,
      preferredAngle,
    })),
  };
}

/** The geometries of one answer as molfiles: conformers lowest first, or the points of a profile by angle. */
export async function geometries(
  member: Member,
  moleculeId: string,
  resultId: string,
): Promise<string[]> {
  const stored = await molecules.get(member, moleculeId);
  const own = await resultIdsOf(member, stored.id);
  if (!own.includes(resultId)) notFound('result');
  const molecule = molecules.readStored(stored);
  const [answer] = await readAnswers([resultId], stored.atomCount);
  const frames =
    answer.conformers.length > 0
      ? answer.conformers
      : answer.profiles.flatMap((profile) => profile.points);
  return frames.length > 0
    ? frames.map(({ coordinates }) => writeMolfile(molecule, coordinates))
    : [answer.molfile];
}
