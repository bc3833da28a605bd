/** Every answer of a molecule in a sentence, at a temperature and in a unit, for its page and its report. */
import { conjugationAt } from '$lib/domain/conjugation-reading';
import { freeLeader, readConformers } from '$lib/domain/conformers-reading';
import type { EnergyUnit } from '$lib/domain/energy-units';
import { mapSentence } from '$lib/domain/map-sentence';
import { wayBetween } from '$lib/domain/map-way';
import { readOpinion } from '$lib/domain/opinion-reading';
import { disagreementSentence } from '$lib/domain/opinion-sentences';
import { readProfile } from '$lib/domain/profile-reading';
import {
  byModel,
  conformersSentence,
  conjugationSentence,
  remarked,
  scanSentence,
  strainSentence,
} from '$lib/domain/sentences';
import type { PageData } from './$types';

type Molecule = PageData['molecule'];

interface Reading {
  /** K; null reads each answer at the temperature it was computed for. */
  readonly temperature: number | null;
  readonly unit: EnergyUnit;
}

export interface AnswerInWords {
  readonly key: string;
  /** The id of the section it rests on. */
  readonly evidence: string;
  readonly name: string;
  /** What tells it from other answers about the same; empty where it is alone. */
  readonly distinction: string;
  readonly text: string;
}

/** The sentences in the order they are read. */
export function answersInWords(molecule: Molecule, reading: Reading): AnswerInWords[] {
  return [
    ...molecule.conjugation.flatMap((answer) => conjugationInWords(answer, reading)),
    ...molecule.scans.map((scan) => scanInWords(scan, reading)),
    ...molecule.maps.map((answer) => mapInWords(answer, reading)),
    ...molecule.conformers.map((answer) => conformersInWords(answer, reading)),
    ...molecule.strain.map((answer) => strainInWords(answer, reading)),
  ];
}

function conjugationInWords(
  answer: Molecule['conjugation'][number],
  reading: Reading,
): AnswerInWords[] {
  const temperature = reading.temperature ?? answer.temperature;
  return answer.bonds.map((bond) => {
    const sCisFraction =
      bond.sCisFraction !== null && bond.profile
        ? conjugationAt(bond.profile, temperature).sCisFraction
        : bond.sCisFraction;
    const facts = { ...bond, bond: byModel(bond.name, answer.model), sCisFraction, temperature };
    return {
      key: `${answer.id} ${bond.name}`,
      evidence: `conjugation-${answer.id}`,
      name: `Conjugation of ${bond.name}`,
      distinction: answer.distinction,
      text: remarked(conjugationSentence(facts, reading.unit), answer.warnings),
    };
  });
}

function scanInWords(scan: Molecule['scans'][number], reading: Reading): AnswerInWords {
  const temperature = reading.temperature ?? scan.temperature;
  const [opinion] = scan.opinions;
  const disagreement = opinion
    ? disagreementSentence(
        scan.bond,
        readOpinion(scan, opinion, temperature).disagreements,
        reading.unit,
      )
    : '';
  const facts = {
    bond: byModel(scan.bond, scan.model),
    reading: readProfile(scan, temperature),
    relaxed: scan.relaxed,
    complete: scan.complete,
    converged: scan.stationary.every(({ converged }) => converged),
  };
  return {
    key: scan.id,
    evidence: `scan-${scan.id}`,
    name: `Turn about ${scan.bond}`,
    distinction: scan.distinction,
    text: `${disagreement} ${remarked(scanSentence(facts, reading.unit), scan.warnings)}`.trim(),
  };
}

function mapInWords(answer: Molecule['maps'][number], { unit }: Reading): AnswerInWords {
  const name = `Map of ${answer.torsions.map(({ bond }) => bond).join(' and ')}`;
  const facts = {
    minima: answer.minima.length,
    lowest: answer.minima.at(0)?.labels ?? null,
    way: wayBetween(answer, 0, 1),
    complete: answer.complete,
  };
  return {
    key: answer.id,
    evidence: `map-${answer.id}`,
    name,
    distinction: answer.distinction,
    text: remarked(`${name}: ${mapSentence(facts, unit)}`, answer.warnings),
  };
}

function conformersInWords(
  answer: Molecule['conformers'][number],
  reading: Reading,
): AnswerInWords {
  const temperature = reading.temperature ?? answer.temperature;
  const conformers = readConformers(answer.rows, temperature);
  const facts = {
    model: answer.model,
    count: answer.rows.length,
    window: answer.window,
    lowestPopulation: conformers.populations[0],
    temperature,
    complete: answer.complete,
    free: freeLeader(conformers),
  };
  return {
    key: answer.id,
    evidence: `conformers-${answer.id}`,
    name: 'Conformers',
    distinction: answer.distinction,
    text: remarked(conformersSentence(facts, reading.unit), answer.warnings),
  };
}

function strainInWords(answer: Molecule['strain'][number], { unit }: Reading): AnswerInWords {
  const [worst] = answer.torsions;
  const facts = {
    model: answer.model,
    strain: answer.strain,
    worst: worst ? { bond: worst.name, strain: worst.strain } : null,
    complete: answer.complete,
  };
  return {
    key: answer.id,
    evidence: `strain-${answer.id}`,
    name: 'Strain',
    distinction: answer.distinction,
    text: remarked(strainSentence(facts, unit), answer.warnings),
  };
}
