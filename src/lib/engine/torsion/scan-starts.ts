/** Geometries a torsion scan starts from. */
import { defaultConformerSearchOptions } from '../conformers/conformers';
import { searchConformers } from '../conformers/search';
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import type { Molecule } from '../molecule/molecule';
import { readHandedness } from './handedness';
import type { Handedness } from './handedness';

/** Low conformers taken as starts, and how high they may lie, kcal/mol. */
const MOST_STARTS = 12;
const START_WINDOW = 6;

/** The molecule's low conformers (Å, 3N), lowest first, their alike end atoms numbered the same way round. */
export async function findStarts(
  forceField: ForceField,
  seed: number,
  control: Control,
): Promise<{ starts: Float64Array[]; complete: boolean }> {
  const options = {
    ...defaultConformerSearchOptions,
    limit: MOST_STARTS,
    window: START_WINDOW,
    effort: 'quick',
    seed,
  } as const;
  const { conformers, ended } = await searchConformers(forceField, options, control);
  const starts = conformers.map(({ coordinates }) => Float64Array.from(coordinates));
  const { molecule } = forceField;
  const handedness = readHandedness(molecule, starts[0]);
  for (const x of starts) alignEndAtoms(molecule, handedness, x);
  return { starts, complete: ended !== 'budget' };
}

/**
 * Renumbers alike end atoms of one center (the hydrogens of a CH2 or CH3) where they run the other way round than in the
 * reference, in place: geometries along a scan then follow each other without atoms that change places.
 */
function alignEndAtoms(molecule: Molecule, reference: Handedness, x: Float64Array): void {
  const own = readHandedness(molecule, x);
  reference.centers.forEach((center, atom) => {
    if (!center || own.centers[atom]?.sign === center.sign) return;
    const ends = center.neighbors.filter(
      (neighbor) =>
        molecule.neighbors[neighbor].length === 1 &&
        molecule.atomicNumbers[neighbor] === 1 &&
        molecule.massNumbers[neighbor] === 0,
    );
    if (ends.length < 2) return;
    const [a, b] = ends.slice(-2);
    for (let p = 0; p < 3; p++) [x[3 * a + p], x[3 * b + p]] = [x[3 * b + p], x[3 * a + p]];
  });
}
