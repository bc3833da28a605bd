/** The vibrations of a profile's stationary points, and whether they are what the profile takes them for. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { torsion as torsionAngle } from '../geometry';
import { imaginaryModes } from '../thermo/free-energy';
import { minimumVibrations, noTime } from '../thermo/minimum-vibrations';
import type { FreeEnergyFlaw, VibrationalAnalysis } from '../thermo/shape-free-energies';
import { softestDirection, vibrationsOf } from '../thermo/vibrations';
import { turnBetween } from '../units';
import { minimizeFreely } from './free-minimum';
import { refineSaddle } from './refine-saddle';
import type { RefinedSaddle } from './refine-saddle';
import type { StationaryPoint } from './scan-result';
import type { TorsionAtoms } from './scan-symmetry';

/** Energies nearer to each other are those of one point, kcal/mol. */
const SAME_ENERGY = 0.02;
/** How far the fastest atom is moved off the saddle before going down, Å. */
const LEAVING_STEP = 0.15;
/** Degrees by which the end of a way down may miss the minimum of the profile: the rest may be arranged otherwise. */
const NEAR_MINIMUM = 25;

/** A maximum between the minima before and behind it. */
interface Barrier {
  readonly top: StationaryPoint;
  readonly sides: readonly [StationaryPoint, StationaryPoint];
}

/**
 * The vibrations of each stationary point of a relaxed scan, in their order. Minima must have no imaginary frequency; from
 * maxima a saddle is sought, which must have one, and lead down to the minima on both sides. Images by symmetry share numbers.
 */
export async function stationaryVibrations(
  forceField: ForceField,
  torsion: TorsionAtoms,
  stationary: readonly StationaryPoint[],
  control: Control,
): Promise<VibrationalAnalysis[]> {
  // Images were made by renumbering and reflection from one geometry, with its energy to the last bit.
  const known = new Map<string, VibrationalAnalysis>();
  const analyses: VibrationalAnalysis[] = [];
  const count = stationary.length;
  for (const [n, point] of stationary.entries()) {
    control.report(n / count, 'vibrations');
    const key = `${point.kind} ${point.energy}`;
    const sides = [stationary[(n + count - 1) % count], stationary[(n + 1) % count]] as const;
    const analysis =
      known.get(key) ??
      (control.expired()
        ? noTime
        : point.kind === 'minimum'
          ? await minimumVibrations(forceField, point.coordinates, control)
          : await saddleVibrations(forceField, torsion, { top: point, sides }, control));
    known.set(key, analysis);
    analyses.push(analysis);
  }
  return analyses;
}

async function saddleVibrations(
  forceField: ForceField,
  torsion: TorsionAtoms,
  barrier: Barrier,
  control: Control,
): Promise<VibrationalAnalysis> {
  const saddle = await refineSaddle(forceField, torsion, barrier.top.coordinates, control);
  if (!saddle) return { modes: null, flaw: control.expired() ? 'no-time' : 'not-refined' };
  const modes = vibrationsOf(saddle.form);
  const flaw: FreeEnergyFlaw | null =
    imaginaryModes(modes) !== 1
      ? 'not-a-saddle'
      : (await joins(forceField, torsion, saddle, barrier, control))
        ? null
        : 'not-the-torsion';
  const rise = saddle.energy - barrier.top.energy;
  return { modes, flaw, ...(rise > SAME_ENERGY && { rise }) };
}

/** Whether the two ways down from a saddle lead to the two sides of a barrier; never where it lies below the profile. */
async function joins(
  forceField: ForceField,
  torsion: TorsionAtoms,
  { coordinates, energy, form }: RefinedSaddle,
  { top, sides }: Barrier,
  control: Control,
): Promise<boolean> {
  if (energy < top.energy - SAME_ENERGY) return false;
  const direction = softestDirection(form);
  const ends: number[] = [];
  for (const sign of [1, -1]) {
    const start = coordinates.map((value, a) => value + sign * LEAVING_STEP * direction[a]);
    const minimum = await minimizeFreely(forceField, start, control);
    if (!minimum) return false;
    ends.push(torsionAngle(minimum.coordinates, ...torsion));
  }
  const isAt = (end: number, side: StationaryPoint): boolean =>
    Math.abs(turnBetween(end, side.angle)) <= NEAR_MINIMUM;
  const [one, other] = ends;
  const [before, behind] = sides;
  return (isAt(one, before) && isAt(other, behind)) || (isAt(other, before) && isAt(one, behind));
}
