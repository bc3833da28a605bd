/** Translates molecules into openchemlib's own objects, whose atom order is not ours. */
import { Molecule as OclMolecule } from 'openchemlib';
import type { Bond, Molecule, Stereobond, Stereocenter } from './molecule';
import { isOddPermutation } from './parity';

/** What a translation needs to know of a molecule. */
export interface TranslatedTables {
  readonly atomicNumbers: ArrayLike<number>;
  readonly formalCharges: ArrayLike<number>;
  readonly massNumbers: ArrayLike<number>;
  readonly bonds: readonly Bond[];
  readonly stereocenters: readonly Stereocenter[];
  readonly stereobonds: readonly Stereobond[];
}

/** An openchemlib molecule and the two ways between its atom numbers and ours; -1 where there is no counterpart. */
export interface OpenchemlibMolecule {
  readonly ocl: OclMolecule;
  readonly toOcl: Int32Array;
  readonly fromOcl: Int32Array;
}

/**
 * The molecule with all its hydrogens as an openchemlib molecule, for conformer seeds and energies. With `coordinates`
 * (3N, Å) it has that geometry; without, it has parities and no coordinates: openchemlib's conformer generator takes a
 * drawing for a first geometry and then misses some configurations.
 */
export function toOpenchemlib(
  molecule: Molecule,
  coordinates?: Readonly<Float64Array>,
): OpenchemlibMolecule {
  const all = Array.from({ length: molecule.atomCount }, (_, atom) => atom);
  // openchemlib moves plain hydrogens behind all other atoms when it first looks at a molecule; they are put there
  // at once, so that the order never changes.
  const isPlain = (atom: number): boolean => isPlainHydrogen(molecule, atom);
  const order = [...all.filter((atom) => !isPlain(atom)), ...all.filter((atom) => isPlain(atom))];
  const translated = translate(molecule, order);
  if (coordinates) {
    order.forEach((atom, n) => {
      translated.ocl.setAtomX(n, coordinates[3 * atom]);
      translated.ocl.setAtomY(n, coordinates[3 * atom + 1]);
      translated.ocl.setAtomZ(n, coordinates[3 * atom + 2]);
    });
  }
  translated.ocl.ensureHelperArrays(OclMolecule.cHelperNeighbours);
  return translated;
}

/** Translates the listed atoms and the bonds between them, in that order, with their configuration as parities. */
export function translate(tables: TranslatedTables, atoms: readonly number[]): OpenchemlibMolecule {
  const ocl = new OclMolecule(atoms.length, tables.bonds.length);
  const toOcl = new Int32Array(tables.atomicNumbers.length).fill(-1);
  atoms.forEach((atom, n) => {
    toOcl[atom] = n;
    ocl.addAtom(tables.atomicNumbers[atom]);
    if (tables.formalCharges[atom] !== 0) ocl.setAtomCharge(n, tables.formalCharges[atom]);
    if (tables.massNumbers[atom] !== 0) ocl.setAtomMass(n, tables.massNumbers[atom]);
  });
  const bondTypes = [
    0,
    OclMolecule.cBondTypeSingle,
    OclMolecule.cBondTypeDouble,
    OclMolecule.cBondTypeTriple,
  ];
  const bondsToOcl = tables.bonds.map(({ a, b, order }) => {
    if (toOcl[a] < 0 || toOcl[b] < 0) return -1;
    const bond = ocl.addBond(toOcl[a], toOcl[b]);
    ocl.setBondType(bond, bondTypes[order]);
    return bond;
  });
  for (const { atom, neighbors, clockwise } of tables.stereocenters) {
    ocl.setAtomParity(toOcl[atom], atomParity(neighbors, clockwise, toOcl), false);
  }
  for (const stereobond of tables.stereobonds) {
    ocl.setBondParity(
      bondsToOcl[stereobond.bond],
      bondParity(tables.bonds, stereobond, toOcl),
      false,
    );
  }
  ocl.setParitiesValid(0);
  return { ocl, toOcl, fromOcl: Int32Array.from(atoms) };
}

/**
 * Draws the molecule in the plane with the wedges that its parities ask for, and has the drawing read again, so that
 * parities stay only on atoms and bonds that are stereogenic and those left open are marked unknown.
 */
export function drawConfiguration(ocl: OclMolecule): void {
  ocl.inventCoordinates();
  ocl.setStereoBondsFromParity();
  ocl.invalidateHelperArrays(OclMolecule.cHelperBitParities);
  ocl.ensureHelperArrays(OclMolecule.cHelperCIP);
}

/**
 * openchemlib's parity 1: seen from the neighbor with the lowest number the others run clockwise in rising order, an
 * implicit hydrogen or lone pair counting as the highest.
 */
function atomParity(neighbors: readonly number[], clockwise: boolean, toOcl: Int32Array): number {
  const places = neighbors.map((atom) => {
    const place = atom < 0 ? -1 : toOcl[atom];
    return place < 0 ? Number.MAX_SAFE_INTEGER : place;
  });
  return clockwise === isOddPermutation(places)
    ? OclMolecule.cAtomParity2
    : OclMolecule.cAtomParity1;
}

/** openchemlib's parity E says that the neighbors with the lowest numbers on either side are trans. */
function bondParity(
  bonds: readonly Bond[],
  { atoms: [first, left, right, last], cis }: Stereobond,
  toOcl: Int32Array,
): number {
  const isLowest = (atom: number, center: number, other: number): boolean =>
    bonds.every(({ a, b }) => {
      const neighbor = a === center ? b : b === center ? a : -1;
      if (neighbor < 0 || neighbor === other || neighbor === atom) return true;
      return toOcl[neighbor] < 0 || (toOcl[atom] >= 0 && toOcl[atom] < toOcl[neighbor]);
    });
  const swapped = isLowest(first, left, right) !== isLowest(last, right, left);
  return cis !== swapped ? OclMolecule.cBondParityZor2 : OclMolecule.cBondParityEor1;
}

/** A hydrogen that openchemlib can leave implicit: natural, neutral, on one heavier atom. */
export function isPlainHydrogen(
  molecule: Pick<Molecule, 'atomicNumbers' | 'formalCharges' | 'massNumbers' | 'neighbors'>,
  atom: number,
): boolean {
  return (
    molecule.atomicNumbers[atom] === 1 &&
    molecule.formalCharges[atom] === 0 &&
    molecule.massNumbers[atom] === 0 &&
    molecule.neighbors[atom].length === 1 &&
    molecule.atomicNumbers[molecule.neighbors[atom][0].atom] > 1
  );
}
