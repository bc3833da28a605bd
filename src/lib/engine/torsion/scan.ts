/** Torsion scan: the energy of a molecule as a function of one torsion. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { hasRightStereo } from '../molecule/stereo';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { createRandom } from '../random';
import { characterizeBond } from './bond-character';
import { checkStep, createGrid } from './grid';
import type { ScanGrid } from './grid';
import { createHeldWave } from './held-wave';
import type { WaveGeometry } from './held-wave';
import { scanRigidly } from './rigid';
import type { ScanOptions, ScanPoint, ScanResult } from './scan-result';
import { findStarts } from './scan-starts';
import { findScanSymmetry } from './scan-symmetry';
import type { ScanSymmetry } from './scan-symmetry';
import { findStationaryPoints } from './stationary-points';
import { checkBent, createTorsionDrive } from './torsion-drive';
import type { TorsionDrive } from './torsion-drive';
import type { Wave } from './wave-front';
import { createKicks, settleWave } from './settle-wave';

/** Smallest step, degrees: 360 points. */
const SMALLEST_STEP = 1;
const WAVE_SETTINGS = { families: 4, window: 4 };
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
  const found = await findStarts(forceField, [torsion], options, control.part(0, STARTS_SHARE));
  const { starts } = found;
  checkBent(starts[0], torsion);
  const classes = symmetryClasses(molecule);
  const character = characterizeBond(molecule, torsion, classes);
  if (!relaxed) return scanRigidly(forceField, drive, starts[0], step, character);

  const symmetry = await findScanSymmetry(
    forceField,
    [torsion],
    starts[0],
    createRandom(seed),
    control,
  );
  const all = symmetry.exact.length > 0 ? starts : [...starts, ...found.mirrored];
  const grid = createGrid(1, step, symmetry.exact);
  const waveControl = control.part(STARTS_SHARE, WAVE_SHARE);
  const isSound = (x: Float64Array): boolean => hasRightStereo(molecule, x);
  const setting = { molecule, drive, grid, classes, isSound };
  const wave = createHeldWave(setting, WAVE_SETTINGS, waveControl);
  const kicks = createKicks(forceField, [torsion], seed);
  const still = await settleWave({ wave, grid, drive, kicks, symmetry }, all, waveControl);

  const points = readPoints(grid, drive, wave);
  const extremes = await findStationaryPoints(
    { forceField, drive, character, symmetry, points, starts: all },
    control.part(WAVE_SHARE, 1),
  );
  return {
    torsion,
    relaxed: true,
    step,
    points,
    stationary: extremes.stationary,
    symmetry: {
      mirror: symmetry.exact.length > 0,
      period: periodOf(symmetry),
    },
    complete: found.complete && still && extremes.complete,
  };
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
function periodOf({ shifting }: ScanSymmetry): number {
  const turns = shifting.filter(({ mirror }) => !mirror).map(({ shift }) => shift);
  return 360 / (new Set(turns).size + 1);
}
