/** Finds out which atoms and double bonds are stereogenic, which of them are undefined, and the canonical SMILES. */
import { Canonizer, Molecule as OclMolecule } from 'openchemlib';
import { ELEMENT_SYMBOLS } from './elements';
import type { Molecule, Stereobond, Stereocenter } from './molecule';
import {
  drawConfiguration,
  isPlainHydrogen,
  translate,
  type OpenchemlibMolecule,
} from './openchemlib';
import {
  canBeStereocenter,
  isHeldByCage,
  isHeldByRing,
  isImineConfiguration,
} from './stereo-limits';
import { symmetryClasses } from './symmetry-classes';
import { writeSmiles } from './write-smiles';

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
  const centers = statedCenters.filter(({ atom }) => canBeStereocenter(molecule, atom));
  const doubleBonds = statedDoubleBonds.filter((stereobond) => !isHeldByRing(molecule, stereobond));
  const tables = { ...molecule, stereocenters: centers, stereobonds: doubleBonds };
  const translated = translate(tables, kept);
  const { ocl, toOcl } = translated;
  drawConfiguration(ocl);
  const parityOf = (atom: number): number => (toOcl[atom] < 0 ? 0 : ocl.getAtomParity(toOcl[atom]));
  const bondParityOf = (bond: number): number => {
    const [a, b] = [toOcl[molecule.bonds[bond].a], toOcl[molecule.bonds[bond].b]];
    return a < 0 || b < 0 ? 0 : ocl.getBondParity(ocl.getBond(a, b));
  };
  const classes = symmetryClasses(molecule);
  const stated = new Set(centers.map(({ atom }) => atom));
  const statedBonds = new Set(doubleBonds.map(({ bond }) => bond));
  const stereocenters = centers.filter(
    ({ atom }) => parityOf(atom) !== OclMolecule.cAtomParityNone,
  );
  const stereobonds = doubleBonds.filter(
    (stereobond) =>
      bondParityOf(stereobond.bond) !== OclMolecule.cBondParityNone ||
      isImineConfiguration(molecule, classes, stereobond),
  );
  return {
    stereocenters,
    stereobonds,
    undefinedCenters: atoms.filter(
      (atom) =>
        !stated.has(atom) &&
        parityOf(atom) === OclMolecule.cAtomParityUnknown &&
        canBeStereocenter(molecule, atom) &&
        !isHeldByCage(molecule, classes, atom),
    ),
    undefinedBonds: molecule.bonds
      .map((_, bond) => bond)
      .filter(
        (bond) =>
          molecule.bonds[bond].order === 2 &&
          !statedBonds.has(bond) &&
          bondParityOf(bond) === OclMolecule.cBondParityUnknown,
      ),
    smiles: canonicalSmiles(
      molecule,
      translated,
      stereocenters,
      stereobonds.filter(({ bond }) => bondParityOf(bond) !== OclMolecule.cBondParityNone),
    ),
  };
}

/** Writes the SMILES in openchemlib's canonical order of the atoms, which takes the configuration into account. */
function canonicalSmiles(
  molecule: Molecule,
  { ocl, toOcl, fromOcl }: OpenchemlibMolecule,
  stereocenters: readonly Stereocenter[],
  stereobonds: readonly Stereobond[],
): string {
  const ranks = new Int32Array(molecule.atomCount).fill(-1);
  new Canonizer(ocl).getFinalRank().forEach((rank, n) => (ranks[fromOcl[n]] = rank));
  const aromaticAtoms = new Uint8Array(molecule.atomCount);
  const aromaticBonds = molecule.bonds.map(({ a, b }) => {
    if (toOcl[a] < 0 || toOcl[b] < 0) return 0;
    if (!ocl.isAromaticBond(ocl.getBond(toOcl[a], toOcl[b]))) return 0;
    aromaticAtoms[a] = aromaticAtoms[b] = 1;
    return 1;
  });
  return writeSmiles(molecule, { ranks, aromaticAtoms, aromaticBonds, stereocenters, stereobonds });
}

/** Molecules of hydrogen alone, for which openchemlib writes one atom too few. */
function hydrogenSmiles(molecule: Molecule): string {
  const atoms = Array.from(molecule.massNumbers).sort((a, b) => b - a);
  const charge = molecule.formalCharges.reduce((sum, value) => sum + value, 0);
  const sign = charge === 0 ? '' : charge > 0 ? '+' : '-';
  return atoms.map((mass) => `[${mass || ''}${ELEMENT_SYMBOLS[1]}${sign}]`).join('');
}
