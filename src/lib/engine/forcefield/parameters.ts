/**
 * The parameters of MMFF94 and MMFF94s, read once from openchemlib's tables. Sources of the numbers: T. A. Halgren,
 * J. Comput. Chem. 1996, 17, 490, 520, 553, 587 and 616; MMFF94s: 1999, 20, 720.
 */
import type { Variant } from './forcefield';
import { readNumericTable, readTable, tableKey } from './parameter-table';

/** Properties of an atom type (MMFF94 part V, table I). */
export interface AtomProperties {
  readonly atomicNumber: number;
  /** Number of bonded atoms. */
  readonly coordination: number;
  readonly valence: number;
  /** Bears a lone pair that can take part in π bonding. */
  readonly piLonePair: boolean;
  /** 0 none, 1 partial, 2 double, 3 triple bonds. */
  readonly multipleBond: number;
  readonly aromatic: boolean;
  readonly linear: boolean;
  /** May be joined by a single bond to another multiply bonded atom ("bond type 1"). */
  readonly singleBetweenMultiple: boolean;
}

/** Van der Waals parameters of an atom type (part II, table I). */
export interface VanDerWaalsParameters {
  readonly polarizability: number;
  readonly effectiveElectrons: number;
  readonly scaleA: number;
  readonly scaleG: number;
  readonly donor: boolean;
  readonly acceptor: boolean;
}

/** Covalent radius in Å and Pauling-scale electronegativity (Allred and Rochow) of an element. */
export interface CovalentParameters {
  readonly radius: number;
  readonly electronegativity: number;
}

/** Tables keyed by `tableKey` of classes and types; values in the units of the papers. */
export interface Parameters {
  readonly properties: ReadonlyMap<number, AtomProperties>;
  /** Equivalent types for the step-down look-ups, levels 1 to 5 at index 0 to 4. */
  readonly equivalents: ReadonlyMap<number, readonly number[]>;
  /** (class, i, j) → [force constant, length] */
  readonly bonds: ReadonlyMap<number, readonly number[]>;
  /** (atomic numbers, smaller first) → [length, force constant] */
  readonly bondReferences: ReadonlyMap<number, readonly number[]>;
  readonly covalent: ReadonlyMap<number, CovalentParameters>;
  /** (rows of the periodic table, smaller first) → [a_ij, d_ij] */
  readonly herschbachLaurie: ReadonlyMap<number, readonly number[]>;
  /** (class, i, j, k) → [force constant, angle]; a force constant of 0 asks for the empirical rule */
  readonly angles: ReadonlyMap<number, readonly number[]>;
  /** (class, i, j, k) → [force constant ijk, kji] */
  readonly stretchBends: ReadonlyMap<number, readonly number[]>;
  /** (rows of i, j, k) → [force constant ijk, kji] */
  readonly stretchBendDefaults: ReadonlyMap<number, readonly number[]>;
  /** (center, then the three others ascending) → [force constant] */
  readonly outOfPlanes: ReadonlyMap<number, readonly number[]>;
  /** (class, i, j, k, l) → [V1, V2, V3] */
  readonly torsions: ReadonlyMap<number, readonly number[]>;
  /** (class, i, j) → [increment added to j, taken from i] */
  readonly chargeIncrements: ReadonlyMap<number, readonly number[]>;
  /** type → [partial bond-charge increment, formal-charge adjustment] */
  readonly partialIncrements: ReadonlyMap<number, readonly number[]>;
  readonly vanDerWaals: ReadonlyMap<number, VanDerWaalsParameters>;
}

const loaded = new Map<Variant, Parameters>();

/** The parameters of a variant; read at the first call, shared afterwards. */
export function parametersOf(variant: Variant): Parameters {
  const known = loaded.get(variant);
  if (known) return known;
  const parameters = loadParameters(variant);
  loaded.set(variant, parameters);
  return parameters;
}

function loadParameters(variant: Variant): Parameters {
  // The two variants differ only in out-of-plane and torsion terms (J. Comput. Chem. 1999, 20, 720).
  const folder = variant === 'MMFF94s' ? '94s/' : '';
  return {
    properties: readProperties(),
    equivalents: keyed('def.csv', 1, 0),
    bonds: keyed('bond.csv', 3),
    bondReferences: keyed('bndk.csv', 2),
    covalent: readCovalent(),
    herschbachLaurie: keyed('herschbachlaurie.csv', 2),
    angles: keyed('angle.csv', 4),
    stretchBends: keyed('stbn.csv', 4),
    stretchBendDefaults: keyed('dfsb.csv', 3),
    outOfPlanes: readOutOfPlanes(`${folder}outofplane.csv`),
    torsions: keyed(`${folder}torsion.csv`, 5),
    chargeIncrements: keyed('bci.csv', 3),
    partialIncrements: keyed('pbci.csv', 1),
    vanDerWaals: readVanDerWaals(),
  };
}

function keyOf([a, b, c, d, e]: readonly number[]): number {
  return tableKey(a, b, c, d, e);
}

/** A table as a map from its first `keys` columns to the columns from `values` on. */
function keyed(name: string, keys: number, values = keys): Map<number, readonly number[]> {
  return new Map(
    readNumericTable(name).map((row) => [keyOf(row.slice(0, keys)), row.slice(values)]),
  );
}

function readOutOfPlanes(name: string): Map<number, readonly number[]> {
  const outOfPlanes = new Map<number, readonly number[]>(
    readNumericTable(name).map(([i, j, k, l, force]) => [
      keyOf([j, ...[i, k, l].sort((a, b) => a - b)]),
      [force],
    ]),
  );
  // openchemlib's MMFF94s table has this one as -0.01; the MMFF94 table and RDKit's copy of both sets have -0.011.
  return outOfPlanes.set(tableKey(64, 37, 63, 64), [-0.011]);
}

function readProperties(): Map<number, AtomProperties> {
  return new Map(
    readNumericTable('atom.csv').map((row) => [
      row[0],
      {
        atomicNumber: row[1],
        coordination: row[2],
        valence: row[3],
        piLonePair: row[4] === 1,
        multipleBond: row[5],
        aromatic: row[6] === 1,
        linear: row[7] === 1,
        singleBetweenMultiple: row[8] === 1,
      },
    ]),
  );
}

function readCovalent(): Map<number, CovalentParameters> {
  return new Map(
    readNumericTable('covrad.csv').map(([element, radius, electronegativity]) => [
      element,
      { radius, electronegativity },
    ]),
  );
}

function readVanDerWaals(): Map<number, VanDerWaalsParameters> {
  return new Map(
    readTable('vanderwaals.csv').map((row) => {
      const [type, polarizability, effectiveElectrons, scaleA, scaleG] = row as number[];
      return [
        type,
        {
          polarizability,
          effectiveElectrons,
          scaleA,
          scaleG,
          donor: row[5] === 'D',
          acceptor: row[5] === 'A',
        },
      ];
    }),
  );
}
