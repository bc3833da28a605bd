/** Finds out which atoms and double bonds are stereogenic, which of them are undefined, and the canonical SMILES. */
import { Molecule as OclMolecule } from 'openchemlib';
import { ELEMENT_SYMBOLS } from './elements';
import type { Molecule, Stereobond, Stereocenter } from './molecule';
import { drawConfiguration, isPlainHydrogen, translate } from './openchemlib';

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
  centers: readonly Stereocenter[],
  doubleBonds: readonly Stereobond[],
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
      (atom) => !stated.has(atom) && parityOf(atom) === OclMolecule.cAtomParityUnknown,
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
