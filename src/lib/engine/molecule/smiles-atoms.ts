/** The atoms of SMILES in brackets, and what to say when the text cannot be read. */
import { InputError } from '../errors';
import { atomicNumberOf } from './elements';
import type { RawAtom } from './raw';

/** Isotope, symbol, chirality, hydrogens, charge and class, in this order. */
const BRACKET_ATOM =
  /^\[(\d{1,4})?([A-Z][a-z]?|[bcnops]|se|as|te|si)(@(?:@|TH[12]|AL[12]|SP[123]|TB\d{1,2}|OH\d{1,2})?)?(H\d?)?(\+\d{1,2}|-\d{1,2}|\++|-+)?(?::\d+)?\]$/;
const TETRAHEDRAL = /^@(?:@|TH[12])?$/;
const QUERY_MARK = /[*~!$&;,?<>{}]/;
const QUERY_ATOM = /[*~!$&;,?#]|^\[\d*(?:R\d*|X|A|a|Q|M)[\]:]/;

/** An error at a character of the text, counted from 1; marks of search patterns are told apart. */
export function smilesFault(text: string, at: number, problem: string): InputError {
  const mark = text[at] ?? '';
  if (QUERY_MARK.test(mark) || text.startsWith('[#', at)) {
    return new InputError(
      'query-feature',
      `Character ${at + 1} of the SMILES ("${mark}") belongs to a search pattern, a reaction or a dummy atom; a whole molecule is needed.`,
    );
  }
  return new InputError('unreadable', `Character ${at + 1} of the SMILES: ${problem}.`);
}

/** Atomic number of a symbol in capitals or, for an aromatic atom, in small letters; 0 for none. */
export function symbolNumber(symbol: string): number {
  return atomicNumberOf(symbol[0].toUpperCase() + symbol.slice(1));
}

/** Reads the bracket atom between two places of the text. */
export function parseBracketAtom(
  text: string,
  from: number,
  to: number,
  atom: number,
): { raw: RawAtom; clockwise: boolean | undefined } {
  const bracket = text.slice(from, to);
  const match = BRACKET_ATOM.exec(bracket);
  if (!match) throw bracketFault(text, from, bracket, atom);
  const [, isotope, symbol, chirality, hydrogens, charge] = match;
  const atomicNumber = symbolNumber(symbol);
  if (atomicNumber === 0) throw bracketFault(text, from, bracket, atom);
  const massNumber = isotope ? Number(isotope) : 0;
  if (isotope && (massNumber < atomicNumber || massNumber > 3 * atomicNumber)) {
    throw new InputError('unreadable', `${bracket} is no isotope that exists.`, { atom });
  }
  const count = hydrogens ? Number(hydrogens.slice(1) || '1') : 0;
  if (atomicNumber === 1 && count > 0) {
    throw new InputError('unreadable', `Write ${bracket} as separate atoms: [H][H].`, { atom });
  }
  if (chirality && !TETRAHEDRAL.test(chirality)) {
    throw new InputError(
      'unsupported-environment',
      `${bracket}: only tetrahedral centers (@ and @@) are handled, not "${chirality}".`,
      { atom },
    );
  }
  return {
    raw: {
      atomicNumber,
      charge: readCharge(charge),
      massNumber,
      hydrogens: count,
      aromatic: symbol === symbol.toLowerCase(),
      line: 0,
    },
    clockwise: chirality ? chirality === '@@' || chirality === '@TH2' : undefined,
  };
}

function bracketFault(text: string, at: number, bracket: string, atom: number): InputError {
  if (QUERY_ATOM.test(bracket)) {
    return new InputError(
      'query-feature',
      `${bracket.slice(0, 40)} stands for an open choice of atoms; a whole molecule is needed.`,
      { atom },
    );
  }
  const symbol = /^\[\d*([A-Za-z][a-z]?)/.exec(bracket)?.[1];
  if (symbol && symbolNumber(symbol) === 0) {
    return new InputError('unknown-element', `${bracket.slice(0, 40)} names no element.`, { atom });
  }
  return smilesFault(text, at, `${bracket.slice(0, 40)} cannot be read as an atom`);
}

function readCharge(text: string | undefined): number {
  if (!text) return 0;
  const size = /\d/.test(text) ? Number(text.slice(1)) : text.length;
  return text[0] === '-' ? -size : size;
}
