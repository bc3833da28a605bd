/** Reads V3000 connection tables, whose fields are separated by blanks. */
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

const WEDGES: Readonly<Record<string, Wedge>> = { 1: 'up', 2: 'either', 3: 'down' };
/** Atom and bond properties that belong to search patterns; 0 means none. */
const QUERY_PROPERTIES =
  /^(HCOUNT|SUBST|UNSAT|RBCNT|RGROUPS|ATTCHPT|ATTCHORD|TOPO|ENDPTS|INVRET|EXACHG)$/;
/** S-group types that repeat, mix or leave open a part of the structure. */
const OPEN_GROUP = /^\d+ +(SRU|MON|MER|COP|CRO|MOD|GRA|COM|MIX|FOR|ANY|MUL)\b/;

interface Entry {
  readonly text: string;
  readonly line: number;
}

interface Table extends ConnectionTable {
  readonly molecule: RawMolecule;
  readonly coordinates: Float64Array;
  readonly wedges: Map<number, Wedge>;
  readonly openDoubleBonds: Set<number>;
  readonly parities: Map<number, number>;
  readonly groupedCenters: number[];
  readonly valences: Map<number, number>;
  /** Place of an atom by its number in the file. */
  readonly places: Map<number, number>;
}

/** Reads the first connection table of the lines. */
export function readV3000(lines: readonly string[]): ConnectionTable {
  const entries = joinEntries(lines);
  const countsAt = entries.findIndex(({ text }) => text.startsWith('COUNTS'));
  if (countsAt < 0)
    throw lineError('unreadable', Math.min(5, lines.length), 'the COUNTS line is missing');
  const counts = entries[countsAt];
  const [atomCount, bondCount] = counts.text
    .split(/\s+/)
    .slice(1, 3)
    .map((field) => readInteger(field, counts.line, 'a count'));
  if (!(atomCount > 0)) throw lineError('empty-input', counts.line, 'the molecule has no atoms');
  if (atomCount > ATOM_LIMIT) {
    throw lineError(
      'too-large',
      counts.line,
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
    places: new Map(),
  };
  readBlocks(table, entries.slice(countsAt + 1));
  const { atoms, bonds } = table.molecule;
  if (atoms.length !== atomCount || bonds.length !== (bondCount || 0)) {
    throw lineError(
      'unreadable',
      counts.line,
      `${atomCount} atoms and ${bondCount || 0} bonds are promised, ${atoms.length} and ${bonds.length} are there; the file may be cut off`,
    );
  }
  applyStatedValences(atoms, bonds, table.valences);
  return table;
}

/** The "M  V30" lines up to "M  END", continued lines joined. */
function joinEntries(lines: readonly string[]): Entry[] {
  const entries: Entry[] = [];
  let pending = '';
  let first = 0;
  for (let index = 4; index < lines.length; index++) {
    const text = lines[index];
    if (/^M {2}END/.test(text)) return entries;
    const match = /^M {2}V30 ?(.*)$/.exec(text.trimEnd());
    if (!match) {
      if (text.trim() === '') continue;
      throw lineError('unreadable', index + 1, 'a line of a V3000 table begins with "M  V30"');
    }
    if (pending === '') first = index + 1;
    const continued = match[1].endsWith('-');
    pending += continued ? match[1].slice(0, -1) : match[1];
    if (continued) continue;
    entries.push({ text: pending.trim(), line: first });
    pending = '';
  }
  throw lineError(
    'unreadable',
    lines.length,
    'the file ends without its "M  END" line; it may be cut off',
  );
}

function readBlocks(table: Table, entries: readonly Entry[]): void {
  const blocks: string[] = [];
  for (const { text, line } of entries) {
    const begin = /^BEGIN +(\w+)/.exec(text)?.[1];
    if (begin) {
      if (/^(RGROUP|TEMPLATE)$/.test(begin)) {
        throw lineError(
          'query-feature',
          line,
          `a ${begin} block leaves the structure open; a whole molecule is needed`,
        );
      }
      blocks.push(begin);
    } else if (/^END\b/.test(text)) {
      blocks.pop();
    } else if (/^LINKNODE/.test(text)) {
      throw lineError(
        'query-feature',
        line,
        'link nodes repeat a part of the structure; a whole molecule is needed',
      );
    } else {
      readEntry(table, blocks.at(-1), text, line);
    }
  }
}

function readEntry(table: Table, block: string | undefined, text: string, line: number): void {
  if (block === 'ATOM') readAtom(table, text, line);
  else if (block === 'BOND') readBond(table, text, line);
  else if (block === 'SGROUP' && OPEN_GROUP.test(text)) {
    throw lineError(
      'query-feature',
      line,
      'the group repeats or mixes a part of the structure; a whole molecule is needed',
    );
  } else if (block === 'COLLECTION') {
    // Racemic (STERAC) and relative (STEREL) groups list their atoms as ATOMS=(count a b …).
    const members = /MDLV30\/STE(?:RAC|REL)\d+.*ATOMS=\(([\d ]+)\)/.exec(text)?.[1];
    for (const member of members?.trim().split(/ +/).slice(1) ?? []) {
      const place = table.places.get(Number(member));
      if (place !== undefined) table.groupedCenters.push(place);
    }
  }
}

/** Splits at blanks that stand outside quotes and parentheses. */
function fieldsOf(text: string): string[] {
  return text.match(/(?:"[^"]*"|\([^)]*\)|[^\s"(])+/g) ?? [];
}

function readAtom(table: Table, text: string, line: number): void {
  const { atoms } = table.molecule;
  const place = atoms.length;
  const [number, symbol = '', x = '', y = '', z = '', , ...properties] = fieldsOf(text);
  if (symbol === 'NOT' || symbol.startsWith('"NOT')) {
    throw lineError(
      'query-feature',
      line,
      'the atom is a choice of elements; a whole molecule is needed',
      place,
    );
  }
  const raw = readSymbol(symbol.replace(/^"|"$/g, ''), place, line);
  const index = readInteger(number ?? '', line, 'an atom');
  if (table.places.has(index))
    throw lineError('unreadable', line, `atom ${index} is listed twice`, place);
  if (3 * place >= table.coordinates.length) {
    throw lineError('unreadable', line, 'there are more atoms than the COUNTS line says', place);
  }
  table.places.set(index, place);
  [x, y, z].forEach((field, axis) => {
    table.coordinates[3 * place + axis] = readCoordinate(field, place, line);
  });
  for (const property of properties) {
    const [key, value = ''] = property.split('=');
    if (key === 'CHG') raw.charge = readCharge(value, line);
    else if (key === 'MASS')
      raw.massNumber = checkMass(raw, readInteger(value, line, 'a mass'), line);
    else if (key === 'VAL') {
      const valence = readInteger(value, line, 'a valence');
      if (valence !== 0) table.valences.set(place, Math.max(0, valence));
    } else if (key === 'CFG' && (value === '1' || value === '2')) {
      table.parities.set(place, Number(value));
    } else if (key === 'RAD' && value !== '0') {
      throw lineError(
        'radical',
        line,
        `atom ${place + 1} is a radical; radicals are not handled`,
        place,
      );
    } else if (QUERY_PROPERTIES.test(key) && value !== '0') {
      throw lineError(
        'query-feature',
        line,
        `${key} belongs to search patterns; a whole molecule is needed`,
        place,
      );
    }
  }
  atoms.push(raw);
}

function readBond(table: Table, text: string, line: number): void {
  const { atoms, bonds } = table.molecule;
  const [, type = '', first = '', second = '', ...properties] = fieldsOf(text);
  const [a, b] = [first, second].map((field) => {
    const place = table.places.get(readInteger(field, line, 'an atom'));
    if (place === undefined)
      throw lineError('unreadable', line, `the bond names atom ${field}, which is not listed`);
    return place;
  });
  const order = readBondOrder(readInteger(type, line, 'a bond type'), line);
  addBond(bonds, atoms, { a, b, order }, line);
  const bond = bonds.length - 1;
  for (const property of properties) {
    const [key, value = ''] = property.split('=');
    if (key === 'CFG' && order === 1 && value in WEDGES) table.wedges.set(bond, WEDGES[value]);
    else if (key === 'CFG' && order === 2 && value === '2') table.openDoubleBonds.add(bond);
    else if (QUERY_PROPERTIES.test(key) && value !== '0') {
      throw lineError(
        'query-feature',
        line,
        `${key} belongs to search patterns; a whole molecule is needed`,
      );
    }
  }
}
