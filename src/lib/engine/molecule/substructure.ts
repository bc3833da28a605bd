/** Substructure search by openchemlib: a pattern, the fingerprint that screens for it, and the match atom by atom. */
import { Molecule as OclMolecule, SmilesParser, SSSearcher } from 'openchemlib';
import { InputError } from '../errors';

/** Longest pattern that is read, characters; and its most atoms, so that no match takes long. */
const LONGEST_PATTERN = 400;
const MOST_ATOMS = 80;

/** openchemlib's 512 keys are fragments of its own choosing, 32 in each number. */
export const FINGERPRINT_BITS = 512;

/** Part of a structure that is looked for in others. Configuration is not compared. */
export interface Pattern {
  /** Bits that every structure with the pattern has, as 512 digits 0 and 1. */
  readonly fingerprint: string;
  /** True when the structure, a SMILES that the engine wrote, holds the pattern. */
  readonly isIn: (smiles: string) => boolean;
}

/** The fingerprint of a structure, given by a SMILES that the engine wrote, as 512 digits 0 and 1. */
export function fingerprintOf(smiles: string): string {
  return digits(readTarget(smiles));
}

/**
 * Reads a pattern written as SMILES or SMARTS: in both, what is left open matches anything, hydrogens that are not
 * written may be any group, and a capital letter stands for the element, aromatic or not. Throws InputError for what openchemlib cannot take.
 */
export function readPattern(text: string): Pattern {
  const written = text.trim();
  if (written === '') throw new InputError('empty-input', 'The structure is empty.');
  if (written.length > LONGEST_PATTERN) {
    throw new InputError(
      'too-large',
      `A structure to look for has at most ${LONGEST_PATTERN} characters.`,
    );
  }
  if (/\s/.test(written)) {
    throw new InputError('unreadable', 'One structure is looked for, written without spaces.');
  }
  const fragment = parsePattern(written);
  const atomCount = fragment.getAllAtoms();
  if (atomCount === 0) {
    throw new InputError('unreadable', 'There is no atom in the structure to look for.');
  }
  if (atomCount > MOST_ATOMS) {
    throw new InputError('too-large', `A structure to look for has at most ${MOST_ATOMS} atoms.`);
  }
  const searcher = new SSSearcher();
  searcher.setFragment(fragment);
  return {
    fingerprint: digits(fragment),
    isIn: (smiles) => {
      searcher.setMolecule(readTarget(smiles));
      return searcher.isFragmentInMolecule();
    },
  };
}

function parsePattern(text: string): OclMolecule {
  const parser = new SmilesParser({ smartsMode: 'smarts', createSmartsWarnings: true });
  const fragment = parse();
  const ignored = parser.getSmartsWarning();
  if (ignored) {
    throw new InputError(
      'query-feature',
      `This part of the SMARTS is not understood: ${ignored}. Leave it out.`,
    );
  }
  fragment.setFragment(true);
  refuseMisread(fragment);
  return fragment;

  function parse(): OclMolecule {
    try {
      return parser.parseMolecule(text, { noStereo: true });
    } catch (error) {
      throw new InputError('unreadable', `This is no SMILES or SMARTS: ${reasonOf(error)}.`);
    }
  }
}

/**
 * openchemlib knows an aromatic bond by its whole ring, and takes the bond that closes a ring of any bonds for a single
 * one; other readings of such patterns would find other molecules, so they are refused rather than guessed.
 */
function refuseMisread(fragment: OclMolecule): void {
  fragment.ensureHelperArrays(OclMolecule.cHelperRings);
  for (let bond = 0; bond < fragment.getAllBonds(); bond++) {
    const isInRing = fragment.isRingBond(bond);
    if (!isInRing && fragment.getBondType(bond) === OclMolecule.cBondTypeDelocalized) {
      throw new InputError(
        'query-feature',
        'Aromatic atoms (small letters) that are bonded are understood only in whole rings. Write the ring whole, or [#6]~[#6] for any bond.',
      );
    }
    if (isInRing && (fragment.getBondQueryFeatures(bond) & OclMolecule.cBondQFBondTypes) !== 0) {
      throw new InputError(
        'query-feature',
        'Bonds of any order (~) are not understood within a ring. Write the orders of the ring’s bonds.',
      );
    }
  }
}

/** What openchemlib says, without the names of its own parts. */
function reasonOf(error: unknown): string {
  const text = error instanceof Error ? error.message : String(error);
  return text.replace(/^.*SmilesParser:\s*/s, '').replace(/[.\s]+$/, '') || 'it cannot be read';
}

function readTarget(smiles: string): OclMolecule {
  return OclMolecule.fromSmiles(smiles, { noStereo: true, noCoordinates: true });
}

function digits(molecule: OclMolecule): string {
  return Array.from(molecule.getIndex(), (word) => (word >>> 0).toString(2).padStart(32, '0')).join(
    '',
  );
}
