/** From a molfile to a molecule: is it a drawing or a geometry, and what do its marks say? */
import { InputError, type InputWarning } from '../errors';
import {
  completeAtoms,
  finishMolecule,
  statedConfiguration,
  type CompletedAtoms,
} from './complete';
import { drawnConfiguration } from './drawn-configuration';
import { atomLabel } from './elements';
import { keepLargestPartOfFile } from './largest-part';
import type { Molecule, Stereocenter } from './molecule';
import type { RawMolfile } from './connection-table';
import { parseMolfile } from './molfile';
import { isOddPermutation } from './parity';
import { placeHydrogens } from './place-hydrogens';
import { spatialConfiguration } from './spatial-configuration';

/** Atoms nearer than this in a geometry lie on one another, Å; the shortest bond there is, H-H, has 0.74. */
const OVERLAP = 0.4;
/** A drawing's bonded atoms nearer than this lie on one another. */
const DRAWN_OVERLAP = 1e-3;
/** Depth from which coordinates are a geometry, Å. */
const DEPTH = 1e-3;

/** Reads the first record of a MOL or SDF text; of several parts only the largest where that is asked for. */
export function readMolfile(text: string, largestPart: boolean): Molecule {
  const written = parseMolfile(text);
  const file = largestPart ? keepLargestPartOfFile(written) : written;
  // The drawing is read before completion, which may move double bonds.
  const drawn = drawnConfiguration(file);
  const completed = completeAtoms(file.molecule);
  const kind = kindOfCoordinates(file, completed);
  if (kind === 'geometry') return readGeometry(file, completed, drawn);
  if (kind === 'drawing') checkDrawing(file);
  const remarks: InputWarning[] =
    kind === 'none' && file.molecule.atoms.length > 1
      ? [
          {
            code: 'geometry-ignored',
            message:
              'All coordinates in the file are zero, so it says nothing of geometry or configuration.',
          },
        ]
      : [];
  const raw = kind === 'none' ? { centers: [], doubleBonds: [] } : drawn;
  const { centers, doubleBonds } = statedConfiguration(completed, raw);
  return finishMolecule(completed, centers, doubleBonds, null, [
    ...remarks,
    ...groupRemarks(file, centers),
  ]);
}

/**
 * Coordinates with depth are a geometry. Flat ones are a drawing, unless the header says 3D and no hydrogen is missing:
 * planar molecules lie flat in 3-D files too.
 */
function kindOfCoordinates(
  file: RawMolfile,
  completed: CompletedAtoms,
): 'geometry' | 'drawing' | 'none' {
  const { coordinates } = file;
  for (let n = 2; n < coordinates.length; n += 3) {
    if (Math.abs(coordinates[n]) > DEPTH) return 'geometry';
  }
  const complete = completed.molecule.atomCount === file.molecule.atoms.length;
  const single = completed.molecule.atomCount === 1;
  if (coordinates.every((value) => value === 0) && !single) return 'none';
  return file.dimensions === '3D' && complete ? 'geometry' : 'drawing';
}

function readGeometry(
  file: RawMolfile,
  completed: CompletedAtoms,
  drawn: ReturnType<typeof drawnConfiguration>,
): Molecule {
  checkGeometry(file);
  const { molecule } = completed;
  const added = molecule.atomCount - molecule.givenAtomCount;
  const coordinates = placeHydrogens(molecule, file.coordinates);
  const remarks: InputWarning[] =
    added > 0
      ? [
          {
            code: 'hydrogens-added',
            message: `${added === 1 ? 'One hydrogen was' : `${added} hydrogens were`} missing in the geometry and placed by rule.`,
          },
        ]
      : [];
  const { centers, doubleBonds } = spatialConfiguration(molecule, coordinates);
  const marks = [
    ...statedConfiguration(completed, { centers: drawn.centers, doubleBonds: [] }).centers,
    ...parityCenters(file, molecule),
  ];
  const result = finishMolecule(completed, centers, doubleBonds, coordinates, remarks);
  const contradicted = result.stereocenters.filter((center) =>
    marks.some((mark) => mark.atom === center.atom && !isSameConfiguration(mark, center)),
  );
  if (contradicted.length === 0) return result;
  const conflicts = contradicted.map(({ atom }): InputWarning => ({
    code: 'stereo-from-geometry',
    message: `The mark at ${atomLabel(molecule.atomicNumbers[atom], atom)} contradicts the 3-D coordinates; the coordinates were followed.`,
    atom,
  }));
  return Object.freeze({ ...result, warnings: Object.freeze([...result.warnings, ...conflicts]) });
}

function checkGeometry({ molecule, coordinates }: RawMolfile): void {
  const { atoms } = molecule;
  for (let a = 0; a < atoms.length; a++) {
    for (let b = 0; b < a; b++) {
      if (spread(coordinates, a, b) < OVERLAP) throw overlap(molecule.atoms, a, b);
    }
  }
}

function checkDrawing({ molecule, coordinates }: RawMolfile): void {
  for (const { a, b } of molecule.bonds) {
    if (spread(coordinates, a, b) < DRAWN_OVERLAP) {
      throw overlap(molecule.atoms, Math.max(a, b), Math.min(a, b));
    }
  }
}

function spread(x: Float64Array, a: number, b: number): number {
  return Math.hypot(x[3 * a] - x[3 * b], x[3 * a + 1] - x[3 * b + 1], x[3 * a + 2] - x[3 * b + 2]);
}

function overlap(atoms: RawMolfile['molecule']['atoms'], a: number, b: number): InputError {
  const [first, second] = [b, a].map((atom) => atomLabel(atoms[atom].atomicNumber, atom));
  return new InputError(
    'bad-geometry',
    `${first} and ${second} lie on one another (lines ${atoms[b].line} and ${atoms[a].line}).`,
    { atom: a, line: atoms[a].line },
  );
}

/**
 * The atom parities of the format: neighbors by rising number, a hydrogen last; with the last one behind, 1 means that
 * the first three run clockwise.
 */
function parityCenters(file: RawMolfile, molecule: Molecule): Stereocenter[] {
  const centers: Stereocenter[] = [];
  for (const [atom, parity] of file.parities) {
    const around = molecule.neighbors[atom].map((neighbor) => neighbor.atom);
    const isHydrogen = (other: number): boolean => molecule.atomicNumbers[other] === 1;
    around.sort((a, b) => Number(isHydrogen(a)) - Number(isHydrogen(b)) || a - b);
    if (around.length === 3) around.push(-1);
    if (around.length !== 4 || around.filter((n) => n >= 0 && isHydrogen(n)).length > 1) continue;
    centers.push({
      atom,
      neighbors: around as [number, number, number, number],
      clockwise: parity === 1,
    });
  }
  return centers;
}

function isSameConfiguration(one: Stereocenter, other: Stereocenter): boolean {
  const places = one.neighbors.map((atom) => other.neighbors.indexOf(atom));
  return (one.clockwise === other.clockwise) !== isOddPermutation(places);
}

/** Racemic and relative groups name one of two forms; the one drawn is taken, and said so. */
function groupRemarks(file: RawMolfile, centers: readonly Stereocenter[]): InputWarning[] {
  return file.groupedCenters
    .filter((atom) => centers.some((center) => center.atom === atom))
    .map((atom) => ({
      code: 'undefined-stereocenter',
      message: `${atomLabel(file.molecule.atoms[atom].atomicNumber, atom)} belongs to a racemic or relative group; the form drawn was taken.`,
      atom,
    }));
}
