/** Geometries a torsion scan starts from: conformers, all numbered the same way round. */
import { defaultConformerSearchOptions } from '../conformers/conformers';
import { searchConformers } from '../conformers/search';
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import type { Molecule } from '../molecule/molecule';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { findAutomorphism } from './automorphism';
import { readHandedness, signedVolume } from './handedness';
import type { Handedness } from './handedness';
import type { ScanOptions } from './scan-result';
import { applySymmetry } from './scan-symmetry';
import type { TorsionAtoms } from './scan-symmetry';

/** Low conformers taken as starts, and how high they may lie, kcal/mol. */
const MOST_STARTS = 12;
const START_WINDOW = 6;

export interface ScanStarts {
  /** Å, 3N: conformers, lowest first, and the geometry given; never empty. */
  readonly starts: readonly Float64Array[];
  /** Their mirror images, as far as the molecule is achiral. */
  readonly mirrored: readonly Float64Array[];
  /** False when the search ran out of time. */
  readonly complete: boolean;
}

/**
 * Finds the molecule's low conformers and numbers alike atoms in all of them the same way round, as turning about bonds
 * leaves it. Which of two alike groups the torsion's end atom is (of an isopropyl's methyls, say) is settled by the
 * given geometry, or else by a rule that does not depend on the order of the atoms.
 */
export async function findStarts(
  forceField: ForceField,
  torsions: readonly TorsionAtoms[],
  { seed, conformers: known }: Pick<ScanOptions, 'seed' | 'conformers'>,
  control: Control,
): Promise<ScanStarts> {
  const { molecule } = forceField;
  const { found, complete } = known?.length
    ? { found: known.slice(0, MOST_STARTS).map((x) => x.slice()), complete: true }
    : await searchStarts(forceField, seed, control);
  const geometries = isWrongEnantiomer(molecule, found[0]) ? found.map(mirrorImage) : found;
  const numbering = createNumbering(molecule, torsions, geometries[0]);
  const numbered = async (from: readonly Float64Array[]): Promise<Float64Array[]> => {
    const done: Float64Array[] = [];
    for (const x of from) {
      if (control.due()) await control.pause();
      const renumbered = numbering(x);
      // What holds for one holds for all, as they have one configuration.
      if (!renumbered) break;
      done.push(renumbered);
    }
    return done;
  };
  const starts = await numbered(geometries);
  if (molecule.coordinates) starts.push(Float64Array.from(molecule.coordinates));
  return {
    starts: starts.length > 0 ? starts : geometries,
    mirrored: await numbered(geometries.map(mirrorImage)),
    complete,
  };
}

async function searchStarts(
  forceField: ForceField,
  seed: number,
  control: Control,
): Promise<{ found: Float64Array[]; complete: boolean }> {
  const options = {
    ...defaultConformerSearchOptions,
    limit: MOST_STARTS,
    window: START_WINDOW,
    effort: 'quick',
    seed,
  } as const;
  const { conformers, ended } = await searchConformers(forceField, options, control);
  const found = conformers.map(({ coordinates }) => Float64Array.from(coordinates));
  return { found, complete: ended !== 'budget' };
}

/**
 * Of a molecule all of whose stereocenters were left open, either mirror image may have been built; the one to scan is
 * told by its first such center, whatever the order of the atoms.
 */
function isWrongEnantiomer(molecule: Molecule, x: Float64Array): boolean {
  if (molecule.stereocenters.length > 0 || molecule.coordinates) return false;
  const classes = symmetryClasses(molecule);
  const open = molecule.warnings
    .flatMap(({ code, atom }) =>
      code === 'undefined-stereocenter' && atom !== undefined ? [atom] : [],
    )
    // The middle of a chiral allene has two neighbors only, which span no volume.
    .filter((atom) => molecule.neighbors[atom].length > 2)
    .sort((a, b) => classes[a] - classes[b]);
  if (open.length === 0) return false;
  const neighbors = molecule.neighbors[open[0]].map(({ atom }) => atom);
  return (
    signedVolume(
      x,
      open[0],
      neighbors.sort((a, b) => classes[a] - classes[b]),
    ) < 0
  );
}

/** The function that renumbers alike atoms of a geometry; null where no renumbering gives the wanted configuration. */
function createNumbering(
  molecule: Molecule,
  torsions: readonly TorsionAtoms[],
  first: Float64Array,
): (x: Float64Array) => Float64Array | null {
  const classes = symmetryClasses(molecule);
  const root = torsions[0][1];
  const renumber = (x: Float64Array, wanted: Handedness): Float64Array | null => {
    const question = { molecule, classes, handedness: readHandedness(molecule, x), wanted };
    const source = findAutomorphism(question, [[root, root]], false);
    if (!source) return null;
    const out = new Float64Array(x.length);
    applySymmetry({ source, mirror: false }, x, out);
    return out;
  };
  if (molecule.coordinates) {
    const given = readHandedness(molecule, Float64Array.from(molecule.coordinates));
    if (renumber(first, given)) return (x) => renumber(x, given);
  }
  let wanted = readHandedness(molecule, first);
  for (const [i, j, k, l] of torsions) {
    for (const ends of [
      [i, j, k],
      [l, k, j],
    ]) {
      const turned = withEndTurned(molecule, classes, wanted, ends, first);
      if (turned && renumber(first, turned)) wanted = turned;
    }
  }
  return (x) => renumber(x, wanted);
}

/**
 * Of two alike substituents of `center`, `end` shall be the one from which, seen against the axis, the other lies
 * clockwise; the configuration with them exchanged where it is not so, else null.
 */
function withEndTurned(
  molecule: Molecule,
  classes: Readonly<Int32Array>,
  handedness: Handedness,
  [end, center, axis]: readonly number[],
  x: Float64Array,
): Handedness | null {
  const twins = molecule.neighbors[center]
    .map(({ atom }) => atom)
    .filter((atom) => atom !== axis && atom !== end && classes[atom] === classes[end]);
  const known = handedness.centers[center];
  if (twins.length !== 1 || !known || signedVolume(x, center, [end, twins[0], axis]) > 0)
    return null;
  const centers = handedness.centers.map((other) =>
    other === known ? { ...known, sign: -known.sign } : other,
  );
  return { ...handedness, centers };
}

function mirrorImage(x: Float64Array): Float64Array {
  return x.map((value, n) => (n % 3 === 2 ? -value : value));
}
