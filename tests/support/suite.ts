/** The published MMFF94 validation suite as recorded beside the project, read into molecules. */
import { existsSync, readFileSync } from 'node:fs';
import { gunzipSync } from 'node:zlib';
import type { TermEnergies, Variant } from '$lib/engine/forcefield/forcefield';
import { createMolecule } from '$lib/engine/molecule/build';
import { atomicNumberOf } from '$lib/engine/molecule/elements';
import type { Bond, Molecule } from '$lib/engine/molecule/molecule';

export interface SuiteStructure {
  readonly name: string;
  readonly molecule: Molecule;
  readonly coordinates: Float64Array;
  readonly types: readonly number[];
  readonly charges: readonly number[];
  /** BatchMin, double precision, with charges of five decimals. */
  readonly batchMin: SuiteEnergies;
  /** OPTIMOL, with charges of full precision; electrostatic and total energies have five decimals. */
  readonly optimol: SuiteEnergies;
}

/** kcal/mol */
export type SuiteEnergies = TermEnergies & { readonly total: number };

interface SuiteRecord {
  name: string;
  molblock: string;
  coords_full: [number, number, number][];
  types: number[];
  partial_charges_rdkit: number[];
  energies: { batchmin_double: Record<string, number>; optimol_log: Record<string, number> };
}

const path = (variant: Variant): string => `../shared/reference/mmff94/${variant}_suite.json.gz`;

/** True when the recorded suite is there. */
export function hasSuite(variant: Variant): boolean {
  return existsSync(path(variant));
}

/** All structures of one variant's suite. */
export function readSuite(variant: Variant): SuiteStructure[] {
  const { molecules } = JSON.parse(gunzipSync(readFileSync(path(variant))).toString()) as {
    molecules: SuiteRecord[];
  };
  return molecules.map((record) => ({
    name: record.name,
    molecule: readMolblock(record.molblock),
    coordinates: Float64Array.from(record.coords_full.flat()),
    types: record.types,
    charges: record.partial_charges_rdkit,
    batchMin: readEnergies(record.energies.batchmin_double),
    optimol: readEnergies(record.energies.optimol_log),
  }));
}

function readEnergies(energies: Record<string, number>): SuiteEnergies {
  return {
    bond: energies.bond,
    angle: energies.angle,
    stretchBend: energies.stretch_bend,
    outOfPlane: energies.oop,
    torsion: energies.torsion,
    vanDerWaals: energies.vdw,
    electrostatic: energies.electrostatic,
    total: energies.total,
  };
}

/** Atoms, bonds and charges of a V2000 block, as they stand. */
function readMolblock(block: string): Molecule {
  const lines = block.split('\n');
  const atomCount = Number(lines[3].slice(0, 3));
  const bondCount = Number(lines[3].slice(3, 6));
  const atomLines = lines.slice(4, 4 + atomCount);
  const bonds = lines.slice(4 + atomCount, 4 + atomCount + bondCount).map(readBond);
  const charges = new Int8Array(atomCount);
  for (const line of lines.filter((text) => text.startsWith('M  CHG'))) {
    const fields = line.slice(9).trim().split(/\s+/).map(Number);
    for (let n = 0; n < fields.length; n += 2) charges[fields[n] - 1] = fields[n + 1];
  }
  const symbols = atomLines.map((line) => line.slice(31, 34).trim());
  // The recorder wrote a charge of +2 on sulfoxide sulfurs although their S=O is drawn double.
  symbols.forEach((symbol, atom) => {
    const isDouble = bonds.some(({ a, b, order }) => order === 2 && (a === atom || b === atom));
    if (symbol === 'S' && charges[atom] === 2 && isDouble) charges[atom] = 0;
  });
  return createMolecule({
    atomicNumbers: symbols.map(atomicNumberOf),
    formalCharges: charges,
    bonds,
  });
}

function readBond(line: string): Bond {
  return {
    a: Number(line.slice(0, 3)) - 1,
    b: Number(line.slice(3, 6)) - 1,
    order: Number(line.slice(6, 9)) as Bond['order'],
  };
}
