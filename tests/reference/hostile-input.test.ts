/**
 * Damaged SMILES and molfiles (2,000, seeded): each is read into a valid molecule or refused with an InputError; none
 * crashes the engine or holds it up.
 */
import { Molecule as OpenchemlibMolecule } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { InputError } from '$lib/engine/errors';
import type { Molecule } from '$lib/engine/molecule/molecule';
import { ATOM_LIMIT } from '$lib/engine/molecule/limits';
import { readMolecule } from '$lib/engine/molecule/read';
import { createRandom } from '$lib/engine/random';
import type { MoleculeInput } from '../support/compute';
import { compute } from '../support/compute';
import { mutateMolfile, mutateSmiles } from '../support/mutations';
import { recordedMolecules } from './recorded-geometries';

/** ms of processor time; a read takes a few, so this is a hang and no slow machine. */
const READ_BUDGET = 5_000;
/** ms a small task is given, and the processor time after which it must have ended all the same. */
const TASK_BUDGET = 300;
const TASK_OVERRUN = 10_000;

/** Processor time of this process, ms: unlike the clock, it stands still while a busy machine does something else. */
function processorTime(): number {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
}

const smilesCorpus = recordedMolecules.map(({ smiles }) => smiles);
const molfileCorpus = recordedMolecules.flatMap(({ molfile }) => [
  molfile,
  OpenchemlibMolecule.fromMolfile(molfile).toMolfileV3(),
]);

const random = createRandom(20240611);
const hostileSmiles: MoleculeInput[] = Array.from({ length: 1200 }, (_, n) => ({
  smiles: mutateSmiles(smilesCorpus[n % smilesCorpus.length], smilesCorpus, random),
}));
const hostileMolfiles: MoleculeInput[] = Array.from({ length: 800 }, (_, n) => ({
  molfile: mutateMolfile(molfileCorpus[(n * 7) % molfileCorpus.length], random),
}));

/** What is wrong with a molecule that was accepted, in words; empty when it keeps its promises. */
function brokenPromises(molecule: Molecule): string[] {
  const { atomCount, coordinates } = molecule;
  const promises: [string, boolean][] = [
    ['has atoms, and not too many', atomCount >= 1 && atomCount <= ATOM_LIMIT],
    ['has tables of one length', molecule.atomicNumbers.length === atomCount],
    ['is frozen', Object.isFrozen(molecule)],
    ['has bonds between its atoms', molecule.bonds.every(({ a, b }) => a < atomCount && b < atomCount)],
    ['has a SMILES', molecule.smiles.length > 0],
    ['has finite coordinates or none', coordinates === null || (coordinates.length === 3 * atomCount && coordinates.every(Number.isFinite))],
  ]; // prettier-ignore
  return promises.filter(([, kept]) => !kept).map(([promise]) => promise);
}

/** How reading ended: 'read', the code of an InputError, or what must not happen. */
function outcomeOf(input: MoleculeInput): string {
  try {
    const broken = brokenPromises(readMolecule(input));
    return broken.length === 0 ? 'read' : `not kept: ${broken.join(', ')}`;
  } catch (error) {
    if (error instanceof InputError && error.message.length > 0) return error.code;
    return `crash: ${String(error)}`;
  }
}

function readAll(inputs: readonly MoleculeInput[]) {
  const bad: { input: string; outcome: string }[] = [];
  const counts: Record<string, number> = {};
  for (const input of inputs) {
    const start = processorTime();
    const outcome = outcomeOf(input);
    const late = processorTime() - start > READ_BUDGET;
    if (late || /^(crash|not kept)/.test(outcome))
      bad.push({ input: JSON.stringify(input), outcome: late ? `hang, ${outcome}` : outcome });
    else counts[outcome] = (counts[outcome] ?? 0) + 1;
  }
  return { bad, counts };
}

describe('damaged input', () => {
  it.each([
    ['1,200 SMILES', hostileSmiles],
    ['800 molfiles', hostileMolfiles],
  ])('%s are read or refused with a reason', (_, inputs) => {
    const { bad, counts } = readAll(inputs);
    console.log(counts);
    expect(bad).toEqual([]);
    // The damage is neither so small that all is read nor so great that nothing is.
    expect(counts.read).toBeGreaterThan(inputs.length / 20);
    expect(counts.read).toBeLessThan(inputs.length * 0.8);
  });

  it('is performed or refused with a reason, within its budget', async () => {
    const some = [...hostileSmiles, ...hostileMolfiles].filter((_, n) => n % 8 === 0);
    const bad: { input: string; outcome: string }[] = [];
    for (const [n, molecule] of some.entries()) {
      const kind = n % 10 === 0 ? 'conformers' : n % 5 === 0 ? 'minimize' : 'energy';
      const start = processorTime();
      let outcome = 'done';
      try {
        await compute(molecule, kind, {}, { budget: TASK_BUDGET });
      } catch (error) {
        if (!(error instanceof InputError)) outcome = `crash: ${String(error)}`;
      }
      if (processorTime() - start > TASK_BUDGET + TASK_OVERRUN) outcome = `hang, ${outcome}`;
      if (outcome !== 'done') bad.push({ input: JSON.stringify(molecule), outcome });
    }
    expect(bad).toEqual([]);
  });
});

describe('requests that do not fit their molecule', () => {
  it.each([
    ['a torsion of atoms that are not bonded', 'CCCC', 'scan', { torsion: [0, 2, 1, 3] }],
    ['a torsion with atoms that do not exist', 'CCCC', 'scan', { torsion: [0, 1, 2, 99] }],
    ['a bond that does not exist', 'CCCC', 'scan', { bond: [0, 3] }],
    ['a bond in a ring', 'C1CCCCC1', 'scan', { bond: [0, 1] }],
    ['strain without a geometry', 'CCCC', 'strain', {}],
  ] as [string, string, 'scan' | 'strain', object][])(
    '%s is an InputError',
    async (_, smiles, kind, settings) => {
      await expect(compute({ smiles }, kind, settings)).rejects.toBeInstanceOf(InputError);
    },
  );
});
