/** What the page of a molecule shows, in the order it is read: answers first, evidence after. */
import { and, count, desc, eq } from 'drizzle-orm';
import { distinctions } from '../domain/settings-text';
import { drawMolecule, writeMolfile, type Molecule } from '../engine';
import { readAnswers, resultIdsOf, type Answer } from './answers';
import { describeConformers } from './conformers-section';
import { conjugationForms, describeConjugation } from './conjugation-section';
import { db } from './db';
import { batches, entries, tasks } from './db/schema';
import { describeMaps, mapGeometries } from './map-section';
import { notFound, type Member } from './member';
import * as molecules from './molecules';
import { bondName } from './molecules';
import * as programTasks from './program-tasks';
import { describeScan, packScan, skeletonOf } from './scan-section';
import { describeStrain, strainGeometries } from './strain-section';
import { versions } from './worker-programs';

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
  const told = distinctions(
    answers.map((answer) => ({ ...answer, subject: subjectOf(molecule, answer) })),
  );
  const of = (kind: Answer['kind']) =>
    answers.flatMap((answer, n) =>
      answer.kind === kind ? [{ ...answer, distinction: told[n] }] : [],
    );
  return {
    id: stored.id,
    name: mentions[0]?.name ?? stored.formula,
    smiles: stored.smiles,
    formula: stored.formula,
    atomCount: stored.atomCount,
    drawing: drawMolecule(molecule),
    skeleton: skeletonOf(molecule),
    batches: mentions.map(({ batchId, batchName }) => ({ id: batchId, name: batchName })),
    tasks: open,
    programs: await versions(),
    programTasks: await programTasks.open(member, stored.id),
    conformers: of('conformers').map((answer) =>
      describeConformers(molecule, stored.rotors, answer, of('ranking')),
    ),
    // A rigid profile is there to be compared with the relaxed one, so it comes after.
    scans: of('scan')
      .flatMap((answer) =>
        answer.profiles.map((profile) => describeScan(molecule, answer, profile, of('opinion'))),
      )
      .toSorted((a, b) => Number(b.relaxed) - Number(a.relaxed)),
    maps: describeMaps(molecule, of('map')),
    conjugation: of('conjugation').map((answer) => describeConjugation(molecule, answer)),
    heats: of('heat').map(describeHeat),
    strain: of('strain').map((answer) => describeStrain(molecule, answer)),
  };
}

/** A heat of formation with what it rests on; kcal/mol. */
function describeHeat({ id, model, details, seconds }: Answer) {
  const { heatOfFormation, tried, gaps, program } = details as {
    heatOfFormation: number;
    tried: number;
    gaps: readonly string[];
    program: string;
  };
  return { id, model, heatOfFormation, tried, gaps, program, seconds };
}

/** What an answer is about: answers about the same need telling apart. */
function subjectOf(molecule: Molecule, { kind, profiles, map }: Answer): string {
  const torsions = [...profiles.map(({ torsion }) => torsion), ...(map?.torsions ?? [])];
  return [kind, ...torsions.map((torsion) => bondName(molecule, torsion.slice(1, 3)))].join(' ');
}

/** One answer of a molecule, for who may see it; anything else is not there. */
async function readAnswer(member: Member, moleculeId: string, resultId: string) {
  const stored = await molecules.get(member, moleculeId);
  const own = await resultIdsOf(member, stored.id);
  if (!own.includes(resultId)) notFound('result');
  const [answer] = await readAnswers([resultId], stored.atomCount);
  return { stored, answer };
}

/** The geometries of a scan as packScan writes them. */
export async function packedGeometries(
  member: Member,
  moleculeId: string,
  resultId: string,
): Promise<Float32Array<ArrayBuffer>> {
  const { answer } = await readAnswer(member, moleculeId, resultId);
  if (answer.kind !== 'scan') notFound('scan');
  return packScan(answer);
}

/**
 * The geometries of one answer as molfiles: conformers lowest first, the points of a profile by angle, the forms of
 * conjugated bonds, the cells and minima of a map, or a strained geometry as given, relaxed in place and unstrained.
 */
export async function geometries(
  member: Member,
  moleculeId: string,
  resultId: string,
): Promise<string[]> {
  const { stored, answer } = await readAnswer(member, moleculeId, resultId);
  const molecule = molecules.readStored(stored);
  const plain = molfilesOf(molecule, answer);
  if (plain) return plain;
  const frames =
    answer.conformers.length > 0
      ? answer.conformers
      : answer.profiles.flatMap((profile) => profile.points);
  return frames.map(({ coordinates }) => writeMolfile(molecule, coordinates));
}

/** The geometries of answers that are neither conformers nor profiles. */
function molfilesOf(molecule: Molecule, answer: Answer): string[] | null {
  if (answer.map) return mapGeometries(molecule, answer.map);
  switch (answer.kind) {
    case 'conjugation':
      return conjugationForms(answer).map(({ molfile }) => molfile);
    case 'strain':
      return strainGeometries(answer);
    case 'heat':
      return [answer.molfile];
    default:
      return null;
  }
}
