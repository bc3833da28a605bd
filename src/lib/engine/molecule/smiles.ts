/** Reads SMILES (Weininger, J. Chem. Inf. Comput. Sci. 1988, 28, 31; OpenSMILES specification 1.0) to the letter. */
import { InputError } from '../errors';
import { ATOM_LIMIT } from './limits';
import type { RawBond, RawCenter, RawDoubleBond, RawMolecule } from './raw';
import { parseBracketAtom, smilesFault, symbolNumber } from './smiles-atoms';

/** The bond symbols, and what each says; the two slashes are single bonds with a direction. */
const BOND_ORDERS: Readonly<Record<string, RawBond['order']>> = {
  '-': 1,
  '=': 2,
  '#': 3,
  ':': 4,
  '/': 1,
  '\\': 1,
};

const ORGANIC_ATOM = /^(?:Cl|Br|[BCNOPSFIbcnops])/;

interface Opened {
  readonly atom: number;
  readonly bond: string;
  readonly at: number;
  /** Where the atom's neighbor list waits for the partner. */
  readonly slot: number;
}

/** State of the walk through one SMILES. */
interface Walk {
  readonly text: string;
  readonly molecule: RawMolecule;
  /** Neighbors of each atom in the order of the text; -1 is the hydrogen of its bracket. */
  readonly order: number[][];
  /** Atoms that follow another atom of the chain. */
  readonly preceded: Set<number>;
  /** Atoms with a chirality mark: true for clockwise. */
  readonly chirality: Map<number, boolean>;
  /** Direction of a slash bond by bond index: +1 when b lies above a. */
  readonly directions: Map<number, number>;
  readonly open: Map<number, Opened>;
  at: number;
}

/** Reads the structure part of a SMILES; every fault is an InputError that names the character or atom. */
export function parseSmiles(text: string): RawMolecule {
  const walk: Walk = {
    text,
    molecule: { name: '', atoms: [], bonds: [], centers: [], doubleBonds: [] },
    order: [],
    preceded: new Set(),
    chirality: new Map(),
    directions: new Map(),
    open: new Map(),
    at: 0,
  };
  readChain(walk);
  for (const { atom, at } of walk.open.values()) {
    throw new InputError(
      'unreadable',
      `The ring opened at character ${at + 1} of the SMILES is never closed.`,
      { atom },
    );
  }
  walk.molecule.centers = readCenters(walk);
  walk.molecule.doubleBonds = readDoubleBonds(walk);
  return walk.molecule;
}

function fault(walk: Walk, problem: string): InputError {
  return smilesFault(walk.text, walk.at, problem);
}

function readChain(walk: Walk): void {
  const branches: { atom: number; at: number; atoms: number }[] = [];
  let previous = -1;
  let bond = '';
  while (walk.at < walk.text.length) {
    const mark = walk.text[walk.at];
    if (mark in BOND_ORDERS) {
      if (bond || previous < 0) throw fault(walk, `a bond symbol "${mark}" that follows no atom`);
      bond = mark;
      walk.at++;
    } else if (mark === '(') {
      const empty = branches.at(-1)?.atoms === walk.molecule.atoms.length;
      if (bond || previous < 0 || empty) throw fault(walk, 'a branch that follows no atom');
      branches.push({ atom: previous, at: walk.at, atoms: walk.molecule.atoms.length });
      walk.at++;
    } else if (mark === ')') {
      const branch = branches.pop();
      if (!branch) throw fault(walk, 'a closing parenthesis without an opening one');
      if (bond || branch.atoms === walk.molecule.atoms.length) {
        throw fault(walk, 'a branch that ends without an atom');
      }
      previous = branch.atom;
      walk.at++;
    } else if (mark === '.') {
      if (bond || previous < 0) throw fault(walk, 'a dot that follows no atom');
      previous = -1;
      walk.at++;
    } else if (/[\d%]/.test(mark)) {
      if (previous < 0) throw fault(walk, 'a ring number that follows no atom');
      readRingNumber(walk, previous, bond);
      bond = '';
    } else {
      const start = walk.at;
      const atom = readAtom(walk);
      if (previous >= 0) {
        addBond(walk, previous, atom, bond, start);
        walk.preceded.add(atom);
      }
      // A hydrogen inside the brackets counts as the next neighbor after the preceding atom.
      for (let n = 0; n < (walk.molecule.atoms[atom].hydrogens ?? 0); n++) {
        walk.order[atom].push(-1);
      }
      previous = atom;
      bond = '';
    }
  }
  const left = branches.pop();
  if (left) {
    walk.at = left.at;
    throw fault(walk, 'a branch that is never closed');
  }
  if (bond) throw fault(walk, 'the SMILES ends with a bond symbol');
  if (previous < 0) throw fault(walk, 'the SMILES ends where an atom is expected');
}

function readAtom(walk: Walk): number {
  const { text, molecule } = walk;
  const atom = molecule.atoms.length;
  if (atom >= ATOM_LIMIT) {
    throw new InputError('too-large', `The molecule has more than ${ATOM_LIMIT} atoms.`, { atom });
  }
  walk.order.push([]);
  if (text[walk.at] === '[') return readBracketAtom(walk, atom);
  const match = ORGANIC_ATOM.exec(text.slice(walk.at, walk.at + 2));
  if (!match) {
    throw fault(walk, `"${text[walk.at]}" is no atom that may stand outside brackets`);
  }
  walk.at += match[0].length;
  const aromatic = match[0] === match[0].toLowerCase();
  molecule.atoms.push({
    atomicNumber: symbolNumber(match[0]),
    charge: 0,
    massNumber: 0,
    hydrogens: null,
    aromatic,
    line: 0,
  });
  return atom;
}

function readBracketAtom(walk: Walk, atom: number): number {
  const end = walk.text.indexOf(']', walk.at);
  if (end < 0) throw fault(walk, 'a bracket that is never closed');
  const { raw, clockwise } = parseBracketAtom(walk.text, walk.at, end + 1, atom);
  if (clockwise !== undefined) walk.chirality.set(atom, clockwise);
  walk.molecule.atoms.push(raw);
  walk.at = end + 1;
  return atom;
}

function readRingNumber(walk: Walk, atom: number, bond: string): void {
  const start = walk.at;
  const match = /^(?:%\((\d{1,5})\)|%(\d\d)|(\d))/.exec(walk.text.slice(start, start + 9));
  if (!match) throw fault(walk, 'a percent sign without a two-digit ring number');
  const number = Number(match[1] ?? match[2] ?? match[3]);
  const opened = walk.open.get(number);
  if (!opened) {
    walk.open.set(number, { atom, bond, at: start, slot: walk.order[atom].push(-2) - 1 });
  } else {
    walk.open.delete(number);
    if (bond && opened.bond && BOND_ORDERS[bond] !== BOND_ORDERS[opened.bond]) {
      throw fault(walk, `ring ${number} is opened and closed with different bonds`);
    }
    closeRing(walk, opened, atom, bond, start);
  }
  walk.at = start + match[0].length;
}

function closeRing(walk: Walk, opened: Opened, atom: number, bond: string, at: number): void {
  // The neighbor takes the place where the ring number stood on either atom.
  const place = walk.order[opened.atom].length;
  addBond(walk, opened.atom, atom, opened.bond || bond, at);
  walk.order[opened.atom][opened.slot] = atom;
  walk.order[opened.atom].length = place;
  // A slash at the closing end is seen from there: it points from the closing atom to the opening one.
  if (!opened.bond && (bond === '/' || bond === '\\')) {
    walk.directions.set(walk.molecule.bonds.length - 1, bond === '/' ? -1 : 1);
  }
}

function addBond(walk: Walk, a: number, b: number, mark: string, at: number): void {
  const { molecule, order } = walk;
  const doubled = molecule.bonds.some(
    (bond) => (bond.a === a && bond.b === b) || (bond.a === b && bond.b === a),
  );
  if (a === b || doubled) {
    throw new InputError(
      'unreadable',
      `Character ${at + 1} of the SMILES bonds atom ${b + 1} ${a === b ? 'to itself' : `to atom ${a + 1} twice`}.`,
      { atom: b },
    );
  }
  const aromatic = molecule.atoms[a].aromatic && molecule.atoms[b].aromatic;
  molecule.bonds.push({ a, b, order: mark ? BOND_ORDERS[mark] : aromatic ? 4 : 1 });
  order[a].push(b);
  order[b].push(a);
  if (mark === '/') walk.directions.set(molecule.bonds.length - 1, 1);
  if (mark === '\\') walk.directions.set(molecule.bonds.length - 1, -1);
}

function readCenters(walk: Walk): RawCenter[] {
  return [...walk.chirality].map(([atom, clockwise]) => {
    const order = walk.order[atom];
    // A three-coordinate centre with a lone pair: the pair stands where a hydrogen would, after the first neighbor.
    const first = walk.preceded.has(atom) ? 1 : 0;
    const neighbors =
      order.length === 3 ? [...order.slice(0, first), -1, ...order.slice(first)] : order;
    if (neighbors.length !== 4 || neighbors.filter((neighbor) => neighbor === -1).length > 1) {
      throw new InputError(
        'unreadable',
        `Atom ${atom + 1} is marked as a stereocenter but has no four different neighbors.`,
        { atom },
      );
    }
    return { atom, neighbors: neighbors as RawCenter['neighbors'], clockwise };
  });
}

function readDoubleBonds(walk: Walk): RawDoubleBond[] {
  const { bonds } = walk.molecule;
  const found: RawDoubleBond[] = [];
  for (const { a, b, order } of bonds) {
    if (order !== 2) continue;
    const left = sideOf(walk, a, b);
    const right = sideOf(walk, b, a);
    if (!left || !right) continue;
    found.push({
      atoms: [left.atom, a, b, right.atom],
      cis: left.above === right.above,
    });
  }
  return found;
}

/** A neighbor of `atom` other than `other` with a direction, and whether it lies above the double bond. */
function sideOf(walk: Walk, atom: number, other: number): { atom: number; above: boolean } | null {
  const { bonds } = walk.molecule;
  const marked: { atom: number; above: boolean }[] = [];
  for (const [index, direction] of walk.directions) {
    const { a, b } = bonds[index];
    if (a === atom && b !== other) marked.push({ atom: b, above: direction > 0 });
    if (b === atom && a !== other) marked.push({ atom: a, above: direction < 0 });
  }
  if (marked.length === 2 && marked[0].above === marked[1].above) {
    throw new InputError(
      'unreadable',
      `The slashes at atom ${atom + 1} put both its neighbors on the same side of the double bond.`,
      { atom },
    );
  }
  return marked[0] ?? null;
}
