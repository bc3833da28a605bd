/** Reads the rows of an upload with the engine's own reader: each becomes a structure with a verdict. */
import { createHash } from 'node:crypto';
import { setImmediate as breathe } from 'node:timers/promises';
import {
  InputError,
  molecularFormula,
  readMolecule,
  rotatableBonds,
  stereoisomers,
  writeMolfile,
  type Molecule,
  type MoleculeInput,
} from '../engine';
import type { Reading, Remark, Rotor } from '../domain/submission';
import type { RawRow } from './rows';

/** A structure as the table of molecules stores it. */
export interface ReadStructure {
  readonly digest: string;
  readonly smiles: string;
  readonly formula: string;
  readonly atomCount: number;
  readonly rotors: readonly Rotor[];
  readonly format: 'smiles' | 'molfile';
  readonly structure: string;
  readonly hasGeometry: boolean;
}

/** A row that was read; without a structure it is an error, and its remarks say which. */
export interface ReadRow {
  readonly line: number | null;
  readonly name: string;
  readonly input: string | null;
  readonly verdict: 'ready' | 'warning' | 'error';
  readonly remarks: readonly Remark[];
  readonly structure: ReadStructure | null;
}

/** Remarks that every added hydrogen or built geometry would bring; they would drown the others. */
const COMMONPLACE = new Set(['hydrogens-added', 'geometry-built']);

/**
 * Reads rows as they come, one result a row, or several where stereoisomers are asked for. The event loop runs between
 * rows, so that a long upload does not hold up other people's pages.
 */
export async function* readRows(
  rows: AsyncIterable<RawRow>,
  reading: Reading,
): AsyncGenerator<ReadRow> {
  const seen = new Set<string>();
  for await (const row of rows) {
    for (const read of readRow(row, reading)) {
      const digest = read.structure?.digest;
      if (reading.mergeDuplicates && digest !== undefined) {
        if (seen.has(digest)) continue;
        seen.add(digest);
      }
      yield read;
    }
    await breathe();
  }
}

/** Reads one row; what is wrong with it becomes a verdict, never an exception. */
export function readRow(row: RawRow, reading: Reading): ReadRow[] {
  try {
    return readInput(row, reading);
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    const { code, message, atom, line } = error;
    return [
      {
        line: row.line,
        name: row.name,
        input: row.text,
        verdict: 'error',
        remarks: [
          {
            code,
            message,
            ...(atom === undefined ? {} : { atom }),
            // A line inside a record counts from the record's first; people count from the file's.
            ...(line === undefined ? {} : { line: row.line + line - 1 }),
          },
        ],
        structure: null,
      },
    ];
  }
}

function readInput(row: RawRow, reading: Reading): ReadRow[] {
  const given: MoleculeInput =
    row.format === 'smiles' ? { smiles: row.text } : { molfile: row.text };
  const molecule = readMolecule(given, { largestPart: reading.stripSalts });
  const name = row.name || molecule.name;
  // Read without its salts a molfile is no longer the text it was.
  const asGiven = row.format === 'molfile' && !reading.stripSalts ? row.text : null;
  if (reading.expandStereo === 0) return [toRow(row, name, molecule, asGiven)];
  const isomers = stereoisomers(molecule, reading.expandStereo);
  if (isomers === null) return [toRow(row, name, molecule, asGiven, [tooManyIsomers(reading)])];
  if (isomers.length === 1) return [toRow(row, name, molecule, asGiven)];
  return isomers.map((isomer, n) =>
    toRow(row, `${name || 'isomer'} (${n + 1} of ${isomers.length})`, isomer, null),
  );
}

function tooManyIsomers({ expandStereo }: Reading): Remark {
  return {
    code: 'too-many-stereoisomers',
    message: `The structure stands for more than ${expandStereo} stereoisomers and was left as it is.`,
  };
}

function toRow(
  row: RawRow,
  name: string,
  molecule: Molecule,
  asGiven: string | null,
  more: readonly Remark[] = [],
): ReadRow {
  const structure = describe(molecule, asGiven);
  const remarks = [...molecule.warnings.filter(({ code }) => !COMMONPLACE.has(code)), ...more];
  return {
    line: row.line,
    name: name || structure.formula,
    input: structure.structure === row.text ? null : row.text,
    verdict: remarks.length > 0 ? 'warning' : 'ready',
    remarks,
    structure,
  };
}

/**
 * A molecule as it is stored: the molfile as given, one written anew where it has a geometry, or its canonical SMILES,
 * so that every spelling of a molecule is the same structure with the same atom order.
 */
function describe(molecule: Molecule, asGiven: string | null): ReadStructure {
  const molfile = asGiven ?? (molecule.coordinates && writeMolfile(molecule, molecule.coordinates));
  const format = molfile === null ? 'smiles' : 'molfile';
  const structure = molfile ?? molecule.smiles;
  const prepared = molfile === null ? readMolecule({ smiles: structure }) : molecule;
  return {
    digest: createHash('sha256')
      .update(`${format}\n${bodyOf(structure, format)}`)
      .digest('hex'),
    smiles: molecule.smiles,
    formula: molecularFormula(prepared),
    atomCount: prepared.atomCount,
    rotors: rotatableBonds(prepared, { terminal: true }).map(
      ({ torsion, conjugated, terminal }) => ({ torsion, conjugated, terminal }),
    ),
    format,
    structure,
    hasGeometry: prepared.coordinates !== null,
  };
}

/** A molfile without its three lines of title and remarks: they name the same structure differently. */
function bodyOf(structure: string, format: 'smiles' | 'molfile'): string {
  return format === 'smiles' ? structure : structure.split('\n').slice(3).join('\n');
}
