/** Reads V2000 connection tables, whose fields stand in fixed columns. */
import { InputError } from '../errors';
import { STANDARD_ATOMIC_WEIGHTS } from './atomic-weights';
import { ELEMENT_SYMBOLS } from './elements';
import { ATOM_LIMIT } from './limits';
import type { ConnectionTable, Wedge } from './connection-table';
import {
  addBond,
  applyStatedValences,
  checkMass,
  lineError,
  readBondOrder,
  readCharge,
  readCoordinate,
  readInteger,
  readSymbol,
} from './molfile-fields';
import type { RawMolecule } from './raw';

/** Charges by the code in the atom line; code 4 is a radical. */
const CHARGE_CODES = [0, 3, 2, 1, 0, -1, -2, -3];
const RADICAL_CODE = 4;
const WEDGES: Readonly<Record<number, Wedge>> = { 1: 'up', 4: 'either', 6: 'down' };
/** Property lines that make a molecule a search pattern. */
const QUERY_LINES = /^M {2}(ALS|RGP|LOG|LIN|SUB|UNS|RBC|APO|AAL|PXA)/;
/** Property lines that change what the bonds mean. */
const UNHANDLED_LINES = /^M {2}(ZBO|ZCH|HYD)/;
/** S-group types that repeat, mix or leave open a part of the structure. */
const OPEN_GROUPS = /\b(SRU|MON|MER|COP|CRO|MOD|GRA|COM|MIX|FOR|ANY|MUL)\b/;

interface Table extends ConnectionTable {
  readonly molecule: RawMolecule;
  readonly wedges: Map<number, Wedge>;
  readonly openDoubleBonds: Set<number>;
  readonly parities: Map<number, number>;
  readonly valences: Map<number, number>;
  readonly radicals: Set<number>;
}

/** Reads atoms, bonds and properties from the lines of a file whose fourth line is the counts line. */
export function readV2000(lines: readonly string[]): ConnectionTable {
  const counts = lines[3];
  const atomCount = readInteger(counts.slice(0, 3), 4, 'the number of atoms');
  const bondCount = readInteger(counts.slice(3, 6), 4, 'the number of bonds');
  if (readInteger(counts.slice(6, 9), 4, 'the number of atom lists') > 0) {
    throw lineError('query-feature', 4, 'the file has atom lists; a whole molecule is needed');
  }
  if (atomCount <= 0) throw lineError('empty-input', 4, 'the molecule has no atoms');
  if (atomCount > ATOM_LIMIT) {
    throw lineError(
      'too-large',
      4,
      `the molecule has ${atomCount} atoms; at most ${ATOM_LIMIT} are handled`,
    );
  }
  const table: Table = {
    molecule: { name: '', atoms: [], bonds: [], centers: [], doubleBonds: [] },
    coordinates: new Float64Array(3 * atomCount),
    wedges: new Map(),
    openDoubleBonds: new Set(),
    parities: new Map(),
    groupedCenters: [],
    valences: new Map(),
    radicals: new Set(),
  };
  for (let n = 0; n < atomCount; n++) readAtomLine(table, lineAt(lines, 4 + n), n, 5 + n);
  for (let n = 0; n < bondCount; n++) {
    readBondLine(table, lineAt(lines, 4 + atomCount + n), 5 + atomCount + n);
  }
  readProperties(table, lines, 4 + atomCount + bondCount);
  for (const atom of table.radicals) {
    throw lineError(
      'radical',
      table.molecule.atoms[atom].line,
      `atom ${atom + 1} is a radical; radicals are not handled`,
      atom,
    );
  }
  applyStatedValences(table.molecule.atoms, table.molecule.bonds, table.valences);
  return table;
}

function lineAt(lines: readonly string[], index: number): string {
  const line = lines[index];
  if (line === undefined || line.startsWith('M  END')) {
    throw lineError(
      'unreadable',
      Math.min(index + 1, lines.length),
      'the file ends before all atoms and bonds are listed',
    );
  }
  return line;
}

function readAtomLine(table: Table, text: string, atom: number, line: number): void {
  const field = (from: number, to: number): string => text.slice(from, to);
  for (let axis = 0; axis < 3; axis++) {
    table.coordinates[3 * atom + axis] = readCoordinate(
      field(10 * axis, 10 * axis + 10),
      atom,
      line,
    );
  }
  const raw = readSymbol(field(31, 34).trim(), atom, line);
  const shift = readInteger(field(34, 36), line, 'a mass difference');
  if (shift !== 0) {
    raw.massNumber = checkMass(
      raw,
      Math.round(STANDARD_ATOMIC_WEIGHTS[raw.atomicNumber]) + shift,
      line,
    );
  }
  const code = readInteger(field(36, 39), line, 'a charge code');
  if (!(code in CHARGE_CODES))
    throw lineError('unreadable', line, `there is no charge code ${code}`, atom);
  raw.charge = CHARGE_CODES[code];
  if (code === RADICAL_CODE) table.radicals.add(atom);
  const parity = readInteger(field(39, 42), line, 'a parity');
  if (parity === 1 || parity === 2) table.parities.set(atom, parity);
  if (readInteger(field(42, 45), line, 'a hydrogen count') > 0) {
    throw lineError(
      'query-feature',
      line,
      `atom ${atom + 1} asks for a number of hydrogens, as search patterns do`,
      atom,
    );
  }
  const valence = readInteger(field(48, 51), line, 'a valence');
  if (valence > 0) table.valences.set(atom, valence === 15 ? 0 : valence);
  table.molecule.atoms.push(raw);
}

function readBondLine(table: Table, text: string, line: number): void {
  const [a, b, type, stereo, , topology] = [0, 3, 6, 9, 12, 15].map((from) =>
    readInteger(text.slice(from, from + 3), line, 'a bond'),
  );
  if (topology > 0) {
    throw lineError(
      'query-feature',
      line,
      'the bond asks for a ring or a chain, as search patterns do',
    );
  }
  const { atoms, bonds } = table.molecule;
  const order = readBondOrder(type, line);
  addBond(bonds, atoms, { a: a - 1, b: b - 1, order }, line);
  const bond = bonds.length - 1;
  if (order === 2 && stereo === 3) table.openDoubleBonds.add(bond);
  if (order === 1 && stereo in WEDGES) table.wedges.set(bond, WEDGES[stereo]);
}

function readProperties(table: Table, lines: readonly string[], first: number): void {
  let charged = false;
  for (let index = first; ; index++) {
    const text = lines[index];
    const line = index + 1;
    if (text === undefined) {
      throw lineError(
        'unreadable',
        lines.length,
        'the file ends without its "M  END" line; it may be cut off',
      );
    }
    if (text.startsWith('M  END')) return;
    if (QUERY_LINES.test(text) || (text.startsWith('M  STY') && OPEN_GROUPS.test(text))) {
      throw lineError(
        'query-feature',
        line,
        `"${text.slice(3, 6)}" leaves a part of the structure open; a whole molecule is needed`,
      );
    }
    if (UNHANDLED_LINES.test(text)) {
      throw lineError(
        'unsupported-environment',
        line,
        `"${text.slice(3, 6)}" changes what the bonds mean and is not handled`,
      );
    }
    if (text.startsWith('A  ') || text.startsWith('G  ')) {
      checkAlias(table, text, lines[index + 1] ?? '', line);
      index++;
    } else if (text.startsWith('S  SKP')) {
      index += readInteger(text.slice(6, 9), line, 'lines to skip');
    } else if (/^M {2}(CHG|RAD)/.test(text)) {
      // The first such line replaces whatever the atom lines say of charges and radicals.
      if (!charged) {
        for (const atom of table.molecule.atoms) atom.charge = 0;
        table.radicals.clear();
      }
      charged = true;
      readPairs(table, text, line).forEach(([atom, value]) => {
        if (text.startsWith('M  CHG')) table.molecule.atoms[atom].charge = readCharge(value, line);
        else if (readInteger(value, line, 'a radical') !== 0) table.radicals.add(atom);
      });
    } else if (text.startsWith('M  ISO')) {
      for (const [atom, value] of readPairs(table, text, line)) {
        const raw = table.molecule.atoms[atom];
        const mass = readInteger(value, line, 'a mass number');
        raw.massNumber = mass === 0 ? 0 : checkMass(raw, mass, line);
      }
    } else if (text.trim() !== '' && !/^[MV] {2}/.test(text)) {
      throw lineError(
        'unreadable',
        line,
        'this is neither a bond nor a property; the counts in line 4 may be wrong',
      );
    }
  }
}

/** An alias that is no element symbol stands for a group that is not drawn. */
function checkAlias(table: Table, text: string, alias: string, line: number): void {
  const atom = readInteger(text.slice(3, 6), line, 'an atom') - 1;
  const symbol = ELEMENT_SYMBOLS[table.molecule.atoms[atom]?.atomicNumber];
  if (symbol && new RegExp(`^${symbol}\\d*$`).test(alias.trim())) return;
  throw new InputError(
    'query-feature',
    `Line ${line}: atom ${atom + 1} stands for "${alias.trim().slice(0, 20)}"; draw that group in full.`,
    { line, atom },
  );
}

/** Atom (from 0) and value of each entry of a property line. */
function readPairs(table: Table, text: string, line: number): [number, string][] {
  const count = readInteger(text.slice(6, 9), line, 'the number of entries');
  const fields = text.slice(9).trim().split(/\s+/);
  if (fields.length !== 2 * count) {
    throw lineError(
      'unreadable',
      line,
      `the line promises ${count} entries and has ${fields.length / 2}`,
    );
  }
  return Array.from({ length: count }, (_, n) => {
    const atom = readInteger(fields[2 * n], line, 'an atom') - 1;
    if (!(atom in table.molecule.atoms)) {
      throw lineError('unreadable', line, `there is no atom ${atom + 1}`);
    }
    return [atom, fields[2 * n + 1]];
  });
}
