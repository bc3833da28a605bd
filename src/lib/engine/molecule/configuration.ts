/** Finds out which atoms and double bonds are stereogenic, which of them are undefined, and the canonical SMILES. */
import { Molecule as OclMolecule } from 'openchemlib';
import { InputError } from '../errors';
import { atomLabel, ELEMENT_SYMBOLS } from './elements';
import type { Molecule, Stereobond, Stereocenter } from './molecule';
import { drawConfiguration, isPlainHydrogen, translate } from './openchemlib';

/** Smallest ring in which both forms of a double bond can be kept (trans-cyclooctene). */
const SMALLEST_RING_WITH_TRANS = 8;

/** What is stereogenic in a molecule. */
export interface Configuration {
  readonly stereocenters: Stereocenter[];
  readonly stereobonds: Stereobond[];
  /** Stereogenic atoms whose configuration nothing states. */
  readonly undefinedCenters: number[];
  /** Stereogenic double bonds whose configuration nothing states. */
  readonly undefinedBonds: number[];
  /** Canonical isomeric SMILES without explicit hydrogens. */
  readonly smiles: string;
}

/**
 * Sorts stated configurations into those that matter and those that do not (two equal substituents), with
 * openchemlib's canonical ranking, which settles mutually dependent centers too.
 */
export function resolveConfiguration(
  molecule: Molecule,
  statedCenters: readonly Stereocenter[],
  statedDoubleBonds: readonly Stereobond[],
): Configuration {
  const atoms = Array.from({ length: molecule.atomCount }, (_, atom) => atom);
  const kept = atoms.filter((atom) => !isPlainHydrogen(molecule, atom));
  if (!kept.some((atom) => molecule.atomicNumbers[atom] > 1)) {
    return {
      stereocenters: [],
      stereobonds: [],
      undefinedCenters: [],
      undefinedBonds: [],
      smiles: hydrogenSmiles(molecule),
    };
  }
  const centers = statedCenters.filter(({ atom }) => !hasEqualEnds(molecule, atom));
  const doubleBonds = statedDoubleBonds.filter((stereobond) => !isHeldByRing(molecule, stereobond));
  const tables = { ...molecule, stereocenters: centers, stereobonds: doubleBonds };
  const { ocl, toOcl } = translate(tables, kept);
  drawConfiguration(ocl);
  const parityOf = (atom: number): number => (toOcl[atom] < 0 ? 0 : ocl.getAtomParity(toOcl[atom]));
  const bondParityOf = (bond: number): number => {
    const [a, b] = [toOcl[molecule.bonds[bond].a], toOcl[molecule.bonds[bond].b]];
    return a < 0 || b < 0 ? 0 : ocl.getBondParity(ocl.getBond(a, b));
  };
  const stated = new Set(centers.map(({ atom }) => atom));
  const statedBonds = new Set(doubleBonds.map(({ bond }) => bond));
  return {
    stereocenters: centers.filter(({ atom }) => parityOf(atom) !== OclMolecule.cAtomParityNone),
    stereobonds: doubleBonds.filter(
      ({ bond }) => bondParityOf(bond) !== OclMolecule.cBondParityNone,
    ),
    undefinedCenters: atoms.filter(
      (atom) =>
        !stated.has(atom) &&
        parityOf(atom) === OclMolecule.cAtomParityUnknown &&
        !hasEqualEnds(molecule, atom),
    ),
    undefinedBonds: molecule.bonds
      .map((_, bond) => bond)
      .filter(
        (bond) =>
          molecule.bonds[bond].order === 2 &&
          !statedBonds.has(bond) &&
          bondParityOf(bond) === OclMolecule.cBondParityUnknown,
      ),
    smiles: canonicalSmiles(ocl),
  };
}

/**
 * True for centers with two terminal neighbors of one kind, which resonance or a proton's move makes equal whatever
 * was drawn: the oxygens of a phosphate, a sulfonate, two methyl hydrogens.
 */
function hasEqualEnds(molecule: Molecule, atom: number): boolean {
  const ends = molecule.neighbors[atom]
    .map((neighbor) => neighbor.atom)
    .filter((neighbor) => molecule.neighbors[neighbor].length === 1)
    .map((end) => `${molecule.atomicNumbers[end]}-${molecule.massNumbers[end]}`);
  return new Set(ends).size < ends.length;
}

/** True for double bonds in rings too small to be anything but cis. */
function isHeldByRing(molecule: Molecule, { bond }: Stereobond): boolean {
  return smallestRing(molecule, bond).length < SMALLEST_RING_WITH_TRANS;
}

/** The smallest ring around a bond; without one, an endless row of atoms stands for the chain. */
function smallestRing(
  molecule: Molecule,
  bond: number,
): { length: number; atoms: readonly number[] } {
  const { a, b } = molecule.bonds[bond];
  if (molecule.ringBonds[bond] === 0) return { length: Infinity, atoms: [] };
  const rings = molecule.rings.filter((ring) => ring.includes(a) && ring.includes(b));
  const atoms = rings.reduce((least, ring) => (ring.length < least.length ? ring : least));
  return { length: atoms.length, atoms };
}

/** Refuses double bonds stated to be trans within a ring of less than eight atoms. */
export function refuseSmallTransRings(
  molecule: Molecule,
  doubleBonds: readonly Stereobond[],
): void {
  for (const { bond, atoms, cis } of doubleBonds) {
    const ring = smallestRing(molecule, bond);
    const [first, left, right, last] = atoms;
    const swapped = ring.atoms.includes(first) !== ring.atoms.includes(last);
    if (ring.length >= SMALLEST_RING_WITH_TRANS || cis !== swapped) continue;
    throw new InputError(
      'unsupported-environment',
      `The double bond ${atomLabel(molecule.atomicNumbers[left], left)}=${atomLabel(molecule.atomicNumbers[right], right)} is trans within a ring of ${ring.length}; that is handled from rings of ${SMALLEST_RING_WITH_TRANS} on.`,
      { atom: left },
    );
  }
}

/** The identity code is canonical, so whatever is written from it is so too. */
function canonicalSmiles(ocl: OclMolecule): string {
  return OclMolecule.fromIDCode(ocl.getIDCode(), true).toIsomericSmiles();
}

/** Molecules of hydrogen alone, for which openchemlib writes one atom too few. */
function hydrogenSmiles(molecule: Molecule): string {
  const atoms = Array.from(molecule.massNumbers).sort((a, b) => b - a);
  const charge = molecule.formalCharges.reduce((sum, value) => sum + value, 0);
  const sign = charge === 0 ? '' : charge > 0 ? '+' : '-';
  return atoms.map((mass) => `[${mass || ''}${ELEMENT_SYMBOLS[1]}${sign}]`).join('');
}
