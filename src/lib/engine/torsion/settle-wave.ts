/** Runs waves over a scan's grid until nothing drops: from conformers first, then from kicked copies of the best. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { symmetryClasses } from '../molecule/symmetry-classes';
import type { ScanGrid } from './grid';
import { startAt } from './held-wave';
import type { WaveGeometry } from './held-wave';
import { createRotorKicks } from './rotor-kicks';
import { applySymmetry } from './scan-symmetry';
import type { ScanSymmetry, TorsionAtoms } from './scan-symmetry';
import { createSoftKick } from './soft-kick';
import type { TorsionDrive } from './torsion-drive';
import type { Start, Wave } from './wave-front';

/** A drop of a cell's energy that is worth another round of kicks, kcal/mol, and rounds at most. */
const WORTHWHILE_DROP = 0.003;
const MOST_ROUNDS = 5;
/** Degrees. */
const FINE_STEP = 20;

/** Creates the function that makes copies of a geometry with other rotors turned, or pushed off a saddle. */
export function createKicks(
  forceField: ForceField,
  torsions: readonly TorsionAtoms[],
  seed: number,
): (x: Float64Array) => Float64Array[] {
  const { molecule, curvature } = forceField;
  const rotorKicks = createRotorKicks(molecule, symmetryClasses(molecule), torsions);
  const softKick = createSoftKick(curvature, 3 * molecule.atomCount, seed);
  return (x) => [...rotorKicks(x), ...softKick(x)];
}

export interface WaveTools {
  readonly wave: Wave<WaveGeometry>;
  readonly grid: ScanGrid;
  readonly drive: TorsionDrive;
  readonly kicks: (x: Float64Array) => Float64Array[];
  readonly symmetry: ScanSymmetry;
}

/** Runs waves from the starts, then from other rotor positions wherever the best changed, until all is still. */
export async function settleWave(
  { wave, grid, drive, kicks, symmetry }: WaveTools,
  starts: readonly Float64Array[],
  control: Control,
): Promise<boolean> {
  const place = (x: Float64Array): Start => startAt(grid, grid.nearest(drive.measure(x)), x);
  const images = (x: Float64Array): Float64Array[] =>
    symmetry.shifting.map((operation) => {
      const image = new Float64Array(x.length);
      applySymmetry(operation, x, image);
      return image;
    });
  const first = starts.flatMap((x) => [x, ...images(x)]).map(place);
  let still = await wave.run(first, control.part(0, 0.5));
  const kicked = new Float64Array(grid.cellCount).fill(Infinity);
  for (let round = 0; still && round < MOST_ROUNDS; round++) {
    const changed = wave.families.flatMap(([best], cell) =>
      best && best.energy < kicked[cell] - WORTHWHILE_DROP ? [{ cell, best }] : [],
    );
    if (changed.length === 0) break;
    const next = changed.flatMap(({ cell, best: { coordinates: x, energy } }): Start[] => {
      kicked[cell] = energy;
      const kickedCopies = round > 0 || isKickedFirst(grid, cell) ? kicks(x) : [];
      return [
        { cell, coordinates: x, thorough: true },
        ...kickedCopies.map((coordinates) => ({ cell, coordinates })),
        ...images(x).map(place),
      ];
    });
    still = await wave.run(next, control.part(0.5 + 0.1 * round, 0.6 + 0.1 * round));
  }
  return still;
}

/**
 * On a fine grid every other cell is enough for the first round: what the kicks bring is carried to the cells between, and
 * what proves better there is kicked again.
 */
function isKickedFirst({ axes, perAxis, step }: ScanGrid, cell: number): boolean {
  if (step > FINE_STEP) return true;
  const position = axes === 1 ? cell : Math.floor(cell / perAxis) + (cell % perAxis);
  return position % 2 === 1;
}
