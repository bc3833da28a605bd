/** The wave-front of a molecule's torsion scan: what a cell is, what a geometry offers to its neighbors, what is the same. */
import type { Control } from '../control';
import { distance } from '../geometry';
import { SEARCHING_GRADIENT_RMS } from '../minimizer/minimizer';
import type { Molecule } from '../molecule/molecule';
import type { ScanGrid } from './grid';
import type { HeldGeometry, TorsionDrive } from './torsion-drive';
import { createWave } from './wave-front';
import type { Start, Wave, WaveSettings } from './wave-front';

/** A held geometry with the numbers that tell it from others. */
export interface WaveGeometry extends HeldGeometry {
  /** Distances (Å) of the heavy atoms from the torsions' atoms, sorted within each class of alike atoms. */
  readonly signature: Float64Array;
}

/** Two geometries of a cell are the same within these: kcal/mol and Å. */
const SAME_ENERGY = 0.003;
const SAME_DISTANCE = 0.05;

/** Gradient of the geometries that end up in the profile, kcal/mol/Å. */
const THOROUGH_GRADIENT_RMS = 0.003;
const MAX_EVALUATIONS = 600;

/** What a wave over a grid needs to know. */
export interface WaveSetting {
  readonly molecule: Molecule;
  readonly drive: TorsionDrive;
  readonly grid: ScanGrid;
  /** Symmetry class of each atom. */
  readonly classes: Readonly<Int32Array>;
  readonly isSound: (x: Float64Array) => boolean;
}

/** Creates the wave; geometries that do not converge or fail `isSound` are left out. */
export function createHeldWave(
  { molecule, drive, grid, classes, isSound }: WaveSetting,
  settings: WaveSettings,
  control: Control,
): Wave<WaveGeometry> {
  const sign = createSignature(molecule, drive, classes);
  return createWave<WaveGeometry>(
    {
      cellCount: grid.cellCount,
      offers: (cell, { coordinates }) =>
        grid.neighbors(cell).map((neighbor) => startAt(grid, neighbor, coordinates)),
      settle: async ({ cell, coordinates, thorough = false }) => {
        const gradientRms = thorough ? THOROUGH_GRADIENT_RMS : SEARCHING_GRADIENT_RMS;
        const relaxation = { gradientRms, maxEvaluations: MAX_EVALUATIONS };
        const held = await drive.relax(coordinates, grid.angles(cell), relaxation, control);
        if (!held.converged || !isSound(held.coordinates)) return null;
        return { ...held, signature: sign(held.coordinates) };
      },
      same: (one, other) =>
        Math.abs(one.energy - other.energy) <= SAME_ENERGY &&
        one.signature.every((value, n) => Math.abs(value - other.signature[n]) <= SAME_DISTANCE),
    },
    settings,
  );
}

/** A geometry as a start for a cell, folded onto the cell that is computed in its place. */
export function startAt(grid: ScanGrid, cell: number, x: Float64Array, thorough = false): Start {
  return { cell: grid.representative(cell), coordinates: grid.fold(cell, x), thorough };
}

function createSignature(
  molecule: Molecule,
  drive: TorsionDrive,
  classes: Readonly<Int32Array>,
): (x: Float64Array) => Float64Array {
  const references = [...new Set(drive.torsions.flat())];
  const groups = new Map<number, number[]>();
  molecule.atomicNumbers.forEach((number, atom) => {
    if (number > 1) groups.set(classes[atom], [...(groups.get(classes[atom]) ?? []), atom]);
  });
  return (x) =>
    Float64Array.from(
      references.flatMap((reference) =>
        [...groups.values()].flatMap((atoms) =>
          atoms.map((atom) => distance(x, atom, reference)).sort((a, b) => a - b),
        ),
      ),
    );
}
