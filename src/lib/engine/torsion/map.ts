/** Two-bond map: the energy of a molecule as a function of two torsions. */
import type { Control } from '../control';
import { InputError } from '../errors';
import type { ForceField } from '../forcefield/forcefield';
import { hasRightStereo } from '../molecule/stereo';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { createRandom } from '../random';
import { turnBetween } from '../units';
import { minimizeFreely } from './free-minimum';
import { checkStep, createGrid } from './grid';
import type { ScanGrid } from './grid';
import { createHeldWave } from './held-wave';
import type { WaveGeometry } from './held-wave';
import { gridMinima } from './path';
import type { EnergyGrid } from './path';
import { findStarts } from './scan-starts';
import { applySymmetry, findScanSymmetry } from './scan-symmetry';
import type { ScanSymmetry, TorsionAtoms } from './scan-symmetry';
import { createKicks, settleWave } from './settle-wave';
import { checkBent, createTorsionDrive } from './torsion-drive';
import type { TorsionDrive } from './torsion-drive';
import type { Wave } from './wave-front';

export interface MapOptions {
  readonly torsions: readonly [TorsionAtoms, TorsionAtoms];
  /** Degrees between two cells; divides 360. */
  readonly step: number;
  readonly seed: number;
}

export const defaultMapOptions: Omit<MapOptions, 'torsions'> = { step: 30, seed: 1 };

/** One cell of the map. */
export interface MapCell {
  /** Target angles, degrees. */
  readonly angles: readonly [number, number];
  /** kcal/mol; Infinity where time ran out before the cell was reached. */
  readonly energy: number;
  /** kcal/mol above the lowest cell. */
  readonly relative: number;
  /** 3N, Å; null where the cell was not reached. */
  readonly coordinates: Float64Array | null;
}

/** A free minimum on the map. */
export interface MapMinimum {
  /** Degrees, of the geometry itself. */
  readonly angles: readonly [number, number];
  readonly energy: number;
  /** kcal/mol above the lowest minimum. */
  readonly relative: number;
  readonly coordinates: Float64Array;
  /** The cell nearest to it: where paths to and from it begin and end. */
  readonly cell: number;
}

export interface MapResult {
  readonly torsions: readonly [TorsionAtoms, TorsionAtoms];
  readonly step: number;
  /** Cells along each side. */
  readonly perAxis: number;
  /** Row by row, the first torsion ascending by row and the second by column, over (-180, 180]. */
  readonly cells: readonly MapCell[];
  /** Lowest first. */
  readonly minima: readonly MapMinimum[];
  readonly complete: boolean;
}

const SMALLEST_STEP = 5;
const WAVE_SETTINGS = { families: 3, window: 4 };
const STARTS_SHARE = 0.15;
const WAVE_SHARE = 0.9;
/** Minima nearer to each other than this in both torsions are one, degrees. */
const SAME_ANGLE = 5;

/**
 * Scans two torsions at once, relaxed, by wave-front propagation over the grid of both. Throws InputError for torsions that
 * cannot turn or turn about one bond, and for a step that does not divide the circle.
 */
export async function scanTorsionMap(
  forceField: ForceField,
  { torsions, step, seed }: MapOptions,
  control: Control,
): Promise<MapResult> {
  checkStep(step, SMALLEST_STEP);
  const { molecule } = forceField;
  const drive = createTorsionDrive(forceField, torsions);
  checkTwoBonds(torsions);
  const found = await findStarts(forceField, torsions, { seed }, control.part(0, STARTS_SHARE));
  const { starts } = found;
  for (const atoms of torsions) checkBent(starts[0], atoms);
  const symmetry = await findScanSymmetry(
    forceField,
    torsions,
    starts[0],
    createRandom(seed),
    control,
  );
  const isMirrored = symmetry.exact.some(({ mirror }) => mirror);
  const all = isMirrored ? starts : [...starts, ...found.mirrored];
  const grid = createGrid(2, step, symmetry.exact);
  const waveControl = control.part(STARTS_SHARE, WAVE_SHARE);
  const isSound = (x: Float64Array): boolean => hasRightStereo(molecule, x);
  const setting = { molecule, drive, grid, classes: symmetryClasses(molecule), isSound };
  const wave = createHeldWave(setting, WAVE_SETTINGS, waveControl);
  const kicks = createKicks(forceField, torsions, seed);
  const still = await settleWave({ wave, grid, drive, kicks, symmetry }, all, waveControl);

  const cells = readCells(grid, wave);
  const minima = await findMapMinima(
    { forceField, drive, grid, symmetry, cells },
    control.part(WAVE_SHARE, 1),
  );
  const isComplete = found.complete && still && !control.expired();
  return { torsions, step, perAxis: grid.perAxis, cells, minima, complete: isComplete };
}

/** The map's energies as the grid that paths are laid over. */
export function mapGrid({ perAxis, cells }: Pick<MapResult, 'perAxis' | 'cells'>): EnergyGrid {
  return { rows: perAxis, columns: perAxis, energies: cells.map(({ energy }) => energy) };
}

function checkTwoBonds([[, j, k], [, m, n]]: MapOptions['torsions']): void {
  if (!((j === m && k === n) || (j === n && k === m))) return;
  throw new InputError('bad-torsion', 'The two torsions turn about the same bond.', { atom: j });
}

function readCells(grid: ScanGrid, { families }: Wave<WaveGeometry>): MapCell[] {
  const lowest = Math.min(...families.flatMap(([best]) => (best ? [best.energy] : [])));
  return Array.from({ length: grid.cellCount }, (_, cell) => {
    const best = families[grid.representative(cell)].at(0);
    const [first, second] = grid.angles(cell);
    const energy = best?.energy ?? Infinity;
    return {
      angles: [first, second],
      energy,
      relative: energy - lowest,
      coordinates: best ? grid.unfold(cell, best.coordinates).slice() : null,
    };
  });
}

interface MapSetting {
  readonly forceField: ForceField;
  readonly drive: TorsionDrive;
  readonly grid: ScanGrid;
  readonly symmetry: ScanSymmetry;
  readonly cells: readonly MapCell[];
}

async function findMapMinima(
  { forceField, drive, grid, symmetry, cells }: MapSetting,
  control: Control,
): Promise<MapMinimum[]> {
  const minima: Omit<MapMinimum, 'relative'>[] = [];
  const add = (energy: number, coordinates: Float64Array): void => {
    const [first, second] = drive.measure(coordinates);
    const isKnown = minima.some(({ angles }) =>
      [first, second].every((angle, t) => Math.abs(turnBetween(angle, angles[t])) < SAME_ANGLE),
    );
    if (isKnown) return;
    const cell = grid.nearest([first, second]);
    minima.push({ angles: [first, second], energy, coordinates, cell });
  };
  for (const cell of gridMinima(mapGrid({ perAxis: grid.perAxis, cells }))) {
    const { coordinates } = cells[cell];
    if (!coordinates || control.expired()) continue;
    const minimum = await minimizeFreely(forceField, coordinates, control);
    if (!minimum) continue;
    add(minimum.energy, minimum.coordinates);
    for (const operation of symmetry.exact) {
      const image = new Float64Array(minimum.coordinates.length);
      applySymmetry(operation, minimum.coordinates, image);
      add(minimum.energy, image);
    }
  }
  minima.sort((a, b) => a.energy - b.energy || a.cell - b.cell);
  return minima.map((minimum) => ({ ...minimum, relative: minimum.energy - minima[0].energy }));
}
