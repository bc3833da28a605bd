/** Torsion scan: the energy of a molecule as a function of one torsion. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { hasRightStereo } from '../molecule/stereo';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { createRandom } from '../random';
import { characterizeBond } from './bond-character';
import { checkStep, createGrid } from './grid';
import type { ScanGrid } from './grid';
import { createHeldWave, startAt } from './held-wave';
import type { WaveGeometry } from './held-wave';
import { scanRigidly } from './rigid';
import { createRotorKicks } from './rotor-kicks';
import type { ScanOptions, ScanPoint, ScanResult } from './scan-result';
import { findStarts } from './scan-starts';
import { applySymmetry, findScanSymmetry } from './scan-symmetry';
import type { ScanSymmetry } from './scan-symmetry';
import { findStationaryPoints } from './stationary-points';
import { checkBent, createTorsionDrive } from './torsion-drive';
import type { TorsionDrive } from './torsion-drive';
import type { Start, Wave } from './wave-front';

/** Smallest step, degrees: 360 points. */
const SMALLEST_STEP = 1;
const WAVE_SETTINGS = { families: 4, window: 4 };
/** A drop of a cell's energy that is worth another round of kicks, kcal/mol, and rounds at most. */
const WORTHWHILE_DROP = 0.003;
const MOST_ROUNDS = 5;
/** Shares of the work, for progress. */
const STARTS_SHARE = 0.3;
const WAVE_SHARE = 0.8;

/**
 * Scans a torsion. Relaxed: the lowest energy found at each angle, by wave-front propagation from several conformers, with
 * the molecule's symmetry used; the same whichever way it is run. Rigid: one side of the lowest conformer turned. Throws
 * InputError for a torsion that cannot turn or a step that does not divide the circle.
 */
export async function scanTorsion(
  forceField: ForceField,
  options: ScanOptions,
  control: Control,
): Promise<ScanResult> {
  const { torsion, step, relaxed, seed } = options;
  checkStep(step, SMALLEST_STEP);
  const { molecule } = forceField;
  const drive = createTorsionDrive(forceField, [torsion]);
  const { starts, complete } = await findStarts(forceField, seed, control.part(0, STARTS_SHARE));
  checkBent(starts[0], torsion);
  const classes = symmetryClasses(molecule);
  const character = characterizeBond(molecule, torsion, classes);
  if (!relaxed) return scanRigidly(forceField, drive, starts[0], step, character);

  const symmetry = findScanSymmetry(forceField, [torsion], starts[0], createRandom(seed));
  const grid = createGrid(1, step, symmetry.exact);
  const waveControl = control.part(STARTS_SHARE, WAVE_SHARE);
  const isSound = (x: Float64Array): boolean => hasRightStereo(molecule, x);
  const setting = { molecule, drive, grid, classes, isSound };
  const wave = createHeldWave(setting, WAVE_SETTINGS, waveControl);
  const kicks = createRotorKicks(molecule, classes, [torsion]);
  const still = await settleWave({ wave, grid, drive, kicks, symmetry }, starts, waveControl);

  const points = readPoints(grid, drive, wave);
  const found = await findStationaryPoints(
    { forceField, drive, character, symmetry, points, starts },
    control.part(WAVE_SHARE, 1),
  );
  return {
    torsion,
    relaxed: true,
    step,
    points,
    stationary: found.stationary,
    symmetry: {
      mirror: symmetry.exact.length > 0,
      period: periodOf(symmetry, drive, starts[0]),
    },
    complete: complete && still && found.complete,
  };
}

interface WaveTools {
  readonly wave: Wave<WaveGeometry>;
  readonly grid: ScanGrid;
  readonly drive: TorsionDrive;
  readonly kicks: (x: Float64Array) => Float64Array[];
  readonly symmetry: ScanSymmetry;
}

/** Runs waves from the starts, then from other rotor positions wherever the best changed, until all is still. */
async function settleWave(
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
      return [
        { cell, coordinates: x, thorough: true },
        ...kicks(x).map((coordinates) => ({ cell, coordinates })),
        ...images(x).map(place),
      ];
    });
    still = await wave.run(next, control.part(0.5 + 0.1 * round, 0.6 + 0.1 * round));
  }
  return still;
}

/** The whole circle, unfolded from the cells computed. */
function readPoints(
  grid: ScanGrid,
  drive: TorsionDrive,
  { families }: Wave<WaveGeometry>,
): ScanPoint[] {
  const lowest = Math.min(...families.flatMap(([best]) => (best ? [best.energy] : [])));
  const points: ScanPoint[] = [];
  for (let cell = 0; cell < grid.cellCount; cell++) {
    const best = families[grid.representative(cell)].at(0);
    if (!best) continue;
    const coordinates = grid.unfold(cell, best.coordinates).slice();
    points.push({
      angle: grid.angles(cell)[0],
      energy: best.energy,
      relative: best.energy - lowest,
      reached: drive.measure(coordinates)[0],
      coordinates,
      converged: best.converged,
    });
  }
  return points;
}

/** 360 over the number of places that symmetric turns bring the torsion to. */
function periodOf({ shifting }: ScanSymmetry, drive: TorsionDrive, x: Float64Array): number {
  const image = new Float64Array(x.length);
  const [start] = drive.measure(x);
  const places = new Set([0]);
  for (const operation of shifting) {
    if (operation.mirror) continue;
    applySymmetry(operation, x, image);
    const turn = drive.measure(image)[0] - start;
    places.add((Math.round(turn / 60) + 6) % 6);
  }
  return 360 / places.size;
}
