/** What both molfile versions share: symbols, numbers and bonds, checked one by one. */
import { InputError, type InputErrorCode } from '../errors';
import { atomicNumberOf } from './elements';
import type { RawAtom, RawBond } from './raw';

/** Atom symbols of the format that stand for an open choice. */
const QUERY_SYMBOLS = new Set(
  'A AH Q QH M MH X XH L LP * R R# Du Pol Mod EP AVG ANY Any'.split(' '),
);

/** An error at a line of the file, counted from 1. */
export function lineError(
  code: InputErrorCode,
  line: number,
  problem: string,
  atom?: number,
): InputError {
  const message = `Line ${line}: ${problem}.`;
  return new InputError(code, message, atom === undefined ? { line } : { line, atom });
}

/** The element or isotope a symbol names; query symbols and unknown ones are errors. */
export function readSymbol(symbol: string, atom: number, line: number): RawAtom {
  const isotope = symbol === 'D' ? 2 : symbol === 'T' ? 3 : 0;
  if (QUERY_SYMBOLS.has(symbol) || /^R\d+$/.test(symbol) || /[[\],]/.test(symbol)) {
    throw lineError(
      'query-feature',
      line,
      `"${symbol}" at atom ${atom + 1} stands for an open choice of atoms; a whole molecule is needed`,
      atom,
    );
  }
  const atomicNumber = isotope ? 1 : atomicNumberOf(symbol);
  if (atomicNumber === 0) {
    throw lineError('unknown-element', line, `"${symbol.slice(0, 20)}" is no element`, atom);
  }
  return { atomicNumber, charge: 0, massNumber: isotope, hydrogens: null, aromatic: false, line };
}

/** A coordinate; anything but a plain finite number is an error. */
export function readCoordinate(text: string, atom: number, line: number): number {
  const field = text.trim();
  if (/^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d{1,3})?$/.test(field)) {
    const value = Number(field);
    if (Math.abs(value) < 1e5) return value;
    throw lineError(
      'bad-geometry',
      line,
      `the coordinate ${field} of atom ${atom + 1} is out of bounds`,
      atom,
    );
  }
  if (/nan|inf|\*|#/i.test(field)) {
    throw lineError('bad-geometry', line, `atom ${atom + 1} has no coordinates ("${field}")`, atom);
  }
  throw lineError('unreadable', line, `"${field.slice(0, 20)}" is no coordinate`, atom);
}

/** A whole number in a field; an empty field is 0. */
export function readInteger(text: string, line: number, what: string): number {
  const field = text.trim();
  if (field === '') return 0;
  if (!/^[+-]?\d+$/.test(field)) {
    throw lineError('unreadable', line, `"${field.slice(0, 20)}" is no number for ${what}`);
  }
  return Number(field);
}

/** The order of a bond type; query, dative and hydrogen bonds are errors. */
export function readBondOrder(type: number, line: number): RawBond['order'] {
  if (type === 1 || type === 2 || type === 3 || type === 4) return type;
  if (type >= 5 && type <= 8) {
    throw lineError(
      'query-feature',
      line,
      `bond type ${type} is a choice of bonds; a whole molecule is needed`,
    );
  }
  throw lineError(
    'unsupported-environment',
    line,
    type === 9 || type === 10
      ? 'coordination and hydrogen bonds are not handled'
      : `there is no bond type ${type}`,
  );
}

/** Adds a bond after checking that both atoms exist and are not bonded yet. */
export function addBond(
  bonds: RawBond[],
  atoms: readonly RawAtom[],
  bond: RawBond,
  line: number,
): void {
  const { a, b, order } = bond;
  for (const end of [a, b]) {
    if (end < 0 || end >= atoms.length) {
      throw lineError('unreadable', line, `the bond names atom ${end + 1} of ${atoms.length}`);
    }
  }
  if (a === b) throw lineError('unreadable', line, `atom ${a + 1} is bonded to itself`, a);
  if (bonds.some((other) => (other.a === a && other.b === b) || (other.a === b && other.b === a))) {
    throw lineError('unreadable', line, `atoms ${a + 1} and ${b + 1} are bonded twice`, a);
  }
  if (order === 4) atoms[a].aromatic = atoms[b].aromatic = true;
  bonds.push(bond);
}

/** A charge within what elements bear. */
export function readCharge(text: string, line: number): number {
  const charge = readInteger(text, line, 'a charge');
  if (Math.abs(charge) > 15) throw lineError('valence', line, `${charge} is no possible charge`);
  return charge;
}

/** A mass number within what isotopes have. */
export function checkMass(atom: RawAtom, mass: number, line: number): number {
  if (mass < atom.atomicNumber || mass > 3 * atom.atomicNumber) {
    throw lineError('unreadable', line, `${mass} is no mass number of that element`);
  }
  return mass;
}

/** Turns a stated total valence into hydrogens, once all bonds are known. */
export function applyStatedValences(
  atoms: readonly RawAtom[],
  bonds: readonly RawBond[],
  valences: ReadonlyMap<number, number>,
): void {
  for (const [atom, valence] of valences) {
    let sum = 0;
    for (const { a, b, order } of bonds) {
      if (a === atom || b === atom) sum += order === 4 ? 1.5 : order;
    }
    const hydrogens = valence - Math.floor(sum);
    if (hydrogens < 0) {
      throw lineError(
        'valence',
        atoms[atom].line,
        `atom ${atom + 1} has more bonds than its stated valence ${valence}`,
        atom,
      );
    }
    atoms[atom].hydrogens = hydrogens;
  }
}
