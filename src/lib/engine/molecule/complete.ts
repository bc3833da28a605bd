/** From what the text says to a complete molecule: double bonds, charges, hydrogens, configuration. */
import { InputError, type InputWarning } from '../errors';
import { createMolecule, type MoleculeParts } from './build';
import { resolveConfiguration, type Configuration } from './configuration';
import { atomLabel } from './elements';
import { kekulize } from './kekulize';
import { ATOM_LIMIT } from './limits';
import {
  bondBetween,
  type Bond,
  type Molecule,
  type Stereobond,
  type Stereocenter,
} from './molecule';
import { isOddPermutation } from './parity';
import { isLinear } from './pi-systems';
import type { RawCenter, RawMolecule } from './raw';
import { countMissingHydrogens, separateCharges } from './valence';

/** A structure with all its atoms and bonds, whose configuration is still to be settled. */
export interface CompletedAtoms {
  readonly tables: MoleculeParts;
  readonly molecule: Molecule;
  /** For each given atom the first hydrogen it was given, -1 for none. */
  readonly firstHydrogen: readonly number[];
}

/**
 * Completes a structure: places the double bonds of aromatic systems and adds the missing hydrogens after the atoms
 * given. Throws InputError for radicals, wrong valences, mixtures and too many atoms.
 */
export function completeAtoms(raw: RawMolecule): CompletedAtoms {
  refuseMixture(raw);
  kekulize(raw);
  separateCharges(raw);
  const hydrogens = countMissingHydrogens(raw);
  const total = hydrogens.reduce((sum, count) => sum + count, raw.atoms.length);
  if (total > ATOM_LIMIT) {
    throw new InputError(
      'too-large',
      `The molecule has ${total} atoms with its hydrogens; at most ${ATOM_LIMIT} are handled.`,
    );
  }
  const { tables, firstHydrogen } = withHydrogens(raw, hydrogens);
  return { tables, molecule: createMolecule(tables), firstHydrogen };
}

/** The configurations the text states, with added hydrogens in the places left open for them. */
export function statedConfiguration(
  { molecule, firstHydrogen }: CompletedAtoms,
  raw: Pick<RawMolecule, 'centers' | 'doubleBonds'>,
): { centers: Stereocenter[]; doubleBonds: Stereobond[] } {
  return {
    centers: raw.centers.map((center) => completeCenter(center, firstHydrogen)),
    doubleBonds: raw.doubleBonds.map(({ atoms, cis }) => ({
      bond: bondBetween(molecule, atoms[1], atoms[2]),
      atoms,
      cis,
    })),
  };
}

/** Keeps the configurations that matter, warns of those left open, and freezes the molecule. */
export function finishMolecule(
  { tables, molecule }: CompletedAtoms,
  centers: readonly Stereocenter[],
  doubleBonds: readonly Stereobond[],
  coordinates: Float64Array | null,
  remarks: readonly InputWarning[] = [],
): Molecule {
  const configuration = resolveConfiguration(molecule, centers, doubleBonds);
  return createMolecule({
    ...tables,
    ...configuration,
    coordinates,
    warnings: [...remarks, ...undefinedWarnings(molecule, configuration)],
  });
}

/** Refuses salts and mixtures: every atom must be reached from the first one. */
function refuseMixture(raw: RawMolecule): void {
  const part = raw.atoms.map((_, atom) => atom);
  const rootOf = (atom: number): number => {
    let root = atom;
    while (part[root] !== root) root = part[root] = part[part[root]];
    return root;
  };
  for (const { a, b } of raw.bonds)
    part[Math.max(rootOf(a), rootOf(b))] = Math.min(rootOf(a), rootOf(b));
  const roots = part.filter((_, atom) => rootOf(atom) === atom);
  if (roots.length < 2) return;
  const atom = roots[1];
  throw new InputError(
    'mixture',
    `The input has ${roots.length} separate parts (a salt or a mixture); the second starts at ${atomLabel(raw.atoms[atom].atomicNumber, atom)}. Send one molecule.`,
    raw.atoms[atom].line > 0 ? { atom, line: raw.atoms[atom].line } : { atom },
  );
}

/** The tables with hydrogens appended, and for each atom the first hydrogen it was given (-1 for none). */
function withHydrogens(raw: RawMolecule, hydrogens: readonly number[]) {
  const atomicNumbers = raw.atoms.map(({ atomicNumber }) => atomicNumber);
  const bonds: Bond[] = raw.bonds.map(({ a, b, order }) => ({
    a,
    b,
    order: order as Bond['order'],
  }));
  const firstHydrogen = hydrogens.map((count, atom) => {
    const first = atomicNumbers.length;
    for (let n = 0; n < count; n++) {
      bonds.push({ a: atom, b: atomicNumbers.length, order: 1 });
      atomicNumbers.push(1);
    }
    return count > 0 ? first : -1;
  });
  const padding = new Array<number>(atomicNumbers.length - raw.atoms.length).fill(0);
  const tables = {
    name: raw.name,
    atomicNumbers,
    formalCharges: [...raw.atoms.map(({ charge }) => charge), ...padding],
    massNumbers: [...raw.atoms.map(({ massNumber }) => massNumber), ...padding],
    bonds,
    givenAtomCount: raw.atoms.length,
  };
  return { tables, firstHydrogen };
}

/** Puts the added hydrogen in its place, or the lone pair last. */
function completeCenter(center: RawCenter, firstHydrogen: readonly number[]): Stereocenter {
  const { atom, clockwise } = center;
  const neighbors = center.neighbors.map((neighbor) =>
    neighbor < 0 ? firstHydrogen[atom] : neighbor,
  );
  const pair = neighbors.indexOf(-1);
  if (pair < 0) return { atom, neighbors: neighbors as RawCenter['neighbors'], clockwise };
  const moved = [...neighbors.filter((neighbor) => neighbor >= 0), -1];
  const places = moved.map((neighbor) => neighbors.indexOf(neighbor));
  return {
    atom,
    neighbors: moved as RawCenter['neighbors'],
    clockwise: clockwise !== isOddPermutation(places),
  };
}

function undefinedWarnings(
  molecule: Molecule,
  { undefinedCenters, undefinedBonds }: Configuration,
): InputWarning[] {
  const label = (atom: number): string => atomLabel(molecule.atomicNumbers[atom], atom);
  return [
    ...undefinedCenters.map((atom): InputWarning => {
      const allene = isLinear(molecule, atom);
      return {
        code: 'undefined-stereocenter',
        message: `${label(atom)} is ${allene ? 'the middle of an allene with two mirror-image forms' : 'a stereocenter'} whose configuration is not stated; the result holds for one of its forms only.`,
        atom,
      };
    }),
    ...undefinedBonds.map((bond): InputWarning => {
      const { a, b } = molecule.bonds[bond];
      return {
        code: 'undefined-double-bond',
        message: `The double bond ${label(a)}=${label(b)} may be E or Z and the input does not say which; the result holds for one of them only.`,
        atom: a,
      };
    }),
  ];
}
