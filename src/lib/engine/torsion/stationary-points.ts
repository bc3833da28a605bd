/** Minima and maxima of a relaxed torsion profile, as geometries of their own and not as grid points. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { createPeriodicCurve } from '../thermo/periodic-curve';
import { turnBetween, wrapDegrees } from '../units';
import type { BondCharacter } from './bond-character';
import { minimizeFreely } from './free-minimum';
import { klynePrelog } from './klyne-prelog';
import { labelGeometry } from './labels';
import type { StationaryKind } from './labels';
import { refineMaximum } from './refine-maximum';
import type { ProfileSample, ScanPoint, StationaryPoint } from './scan-result';
import { applySymmetry } from './scan-symmetry';
import type { ScanSymmetry, SymmetryOperation } from './scan-symmetry';
import type { TorsionDrive } from './torsion-drive';

/** What is known when the grid is done. */
export interface ProfileSetting {
  readonly forceField: ForceField;
  readonly drive: TorsionDrive;
  readonly character: BondCharacter;
  readonly symmetry: ScanSymmetry;
  readonly points: readonly ScanPoint[];
  /** Free minima known from elsewhere, Å. */
  readonly starts: readonly Float64Array[];
}

/** Minima nearer to each other than this are one, degrees. */
const SAME_ANGLE = 2;
/** Mirrored humps on one barrier, with no minimum between them, are one if nearer than this, degrees. */
const SAME_MAXIMUM = 6;
/** A barrier lower than this above the higher of its two minima is noise and separates nothing, kcal/mol. */
const NO_BARRIER = 0.005;
/** A free minimum may lie this much above the curve through the grid and still belong to the profile, kcal/mol. */
const ABOVE_PROFILE = 0.1;

/**
 * Finds the stationary points, ascending in angle, minima and maxima in turn. A minimum of the profile is kept only if a
 * free minimum exists near it; of the barriers between two minima the highest counts.
 */
export async function findStationaryPoints(
  setting: ProfileSetting,
  control: Control,
): Promise<{ stationary: StationaryPoint[]; complete: boolean }> {
  let minima = await findMinima(setting, control.part(0, 0.4));
  const maxima: (ProfileSample | null)[] = [];
  const known: ProfileSample[] = [];
  let complete = true;
  for (let n = 0; n < minima.length;) {
    if (control.expired()) complete = false;
    const next = minima[(n + 1) % minima.length];
    const top = complete ? await barrierBetween(setting, minima[n], next, known, control) : null;
    const rise = top ? top.energy - Math.max(minima[n].energy, next.energy) : Infinity;
    if (minima.length > 1 && rise < NO_BARRIER) {
      const merged = mergeMinima(setting, minima[n], next);
      const others = minima.filter((minimum) => minimum !== minima[n] && minimum !== next);
      minima = [...others, merged].sort((a, b) => a.angle - b.angle);
      maxima.length = 0;
      n = 0;
      continue;
    }
    if (top) known.push(top);
    maxima[n] = top;
    n++;
  }
  const found = [
    ...minima.map((sample) => ({ ...sample, kind: 'minimum' as const })),
    ...maxima.flatMap((sample) => (sample ? [{ ...sample, kind: 'maximum' as const }] : [])),
  ];
  return { stationary: describe(setting, found), complete };
}

function describe(
  { character, symmetry }: ProfileSetting,
  found: readonly (ProfileSample & { kind: StationaryKind })[],
): StationaryPoint[] {
  const lowest = Math.min(...found.map(({ energy }) => energy));
  const mirrored = symmetry.exact.length > 0;
  return found
    .map((sample) => (mirrored ? { ...sample, angle: ontoMirror(sample) } : sample))
    .sort((a, b) => a.angle - b.angle)
    .map((sample) => ({
      ...sample,
      relative: sample.energy - lowest,
      label: labelGeometry(character, sample.coordinates, sample.kind),
      range: klynePrelog(sample.angle),
    }));
}

/** One minimum for two that no barrier parts, the second above the first in angle: between mirror images, else the lower. */
function mergeMinima(
  { symmetry }: ProfileSetting,
  first: ProfileSample,
  second: ProfileSample,
): ProfileSample {
  const areImages =
    symmetry.exact.length > 0 &&
    Math.abs(turnBetween(first.angle, -second.angle)) < SAME_ANGLE / 2 &&
    Math.abs(first.energy - second.energy) < NO_BARRIER;
  if (areImages) {
    const middle = first.angle + spanBetween(first.angle, second.angle) / 2;
    return { ...first, angle: wrapDegrees(middle) };
  }
  // Of two equal ones the nearer to 0 stays, so that mirrored pairs end alike.
  const difference = first.energy - second.energy || Math.abs(first.angle) - Math.abs(second.angle);
  return difference <= 0 ? first : second;
}

/** Of a stationary point and its mirror image so near to each other that they count as one, the angle between them. */
function ontoMirror({ kind, angle }: { kind: StationaryKind; angle: number }): number {
  const within = (kind === 'minimum' ? SAME_ANGLE : SAME_MAXIMUM) / 2;
  if (Math.abs(angle) < within) return 0;
  return Math.abs(angle) > 180 - within ? 180 : angle;
}

/** Free minima from the grid's lowest places and from the starts, ascending in angle. */
async function findMinima(setting: ProfileSetting, control: Control): Promise<ProfileSample[]> {
  const { forceField, drive, symmetry, points, starts } = setting;
  const curve = createPeriodicCurve(
    points.map(({ angle }) => angle),
    points.map(({ energy }) => energy),
  );
  const candidates = [
    ...points.filter((_, n) => isLow(points, n)),
    ...starts.map((coordinates) => ({
      angle: drive.measure(coordinates)[0],
      energy: forceField.energy(coordinates, new Float64Array(coordinates.length)),
      coordinates,
    })),
  ].filter(({ angle, energy }) => energy <= curve.at(angle) + ABOVE_PROFILE);
  candidates.sort((a, b) => a.energy - b.energy);

  const minima: ProfileSample[] = [];
  for (const [n, candidate] of candidates.entries()) {
    if (control.expired() && minima.length > 0) break;
    control.report(n / candidates.length, 'minima');
    const isKnown = minima.some(
      ({ angle, energy }) =>
        Math.abs(turnBetween(angle, candidate.angle)) < SAME_ANGLE && energy <= candidate.energy,
    );
    if (isKnown) continue;
    const minimum = await minimizeFreely(forceField, candidate.coordinates, control);
    if (!minimum) continue;
    const sample = { ...minimum, angle: drive.measure(minimum.coordinates)[0] };
    if (sample.energy > curve.at(sample.angle) + ABOVE_PROFILE) continue;
    const operations = [...symmetry.exact, ...symmetry.shifting];
    const images = imagesOf(setting, sample, operations);
    for (const image of [sample, ...images]) addMinimum(minima, image);
  }
  return minima.sort((a, b) => a.angle - b.angle);
}

/** Not above its neighbors on the grid, wherever gaps leave it any. */
function isLow(points: readonly ScanPoint[], n: number): boolean {
  const count = points.length;
  const { energy } = points[n];
  return (
    energy <= points[(n + count - 1) % count].energy && energy <= points[(n + 1) % count].energy
  );
}

function addMinimum(minima: ProfileSample[], sample: ProfileSample): void {
  const twin = minima.findIndex(
    ({ angle }) => Math.abs(turnBetween(angle, sample.angle)) < SAME_ANGLE,
  );
  if (twin === -1) minima.push(sample);
  else if (sample.energy < minima[twin].energy - 1e-6) minima[twin] = sample;
}

/** The same stationary point elsewhere on the circle, by the molecule's symmetry. */
function imagesOf(
  { drive }: ProfileSetting,
  sample: ProfileSample,
  operations: readonly SymmetryOperation[],
): ProfileSample[] {
  return operations.map((operation) => {
    const coordinates = new Float64Array(sample.coordinates.length);
    applySymmetry(operation, sample.coordinates, coordinates);
    return { ...sample, angle: drive.measure(coordinates)[0], coordinates };
  });
}

/** The highest point on the way up in angle from one minimum to the next; an image of a known one where it fits. */
async function barrierBetween(
  setting: ProfileSetting,
  from: ProfileSample,
  to: ProfileSample,
  known: readonly ProfileSample[],
  control: Control,
): Promise<ProfileSample | null> {
  const span = spanBetween(from.angle, to.angle);
  const inside = ({ angle }: { angle: number }): boolean => {
    const along = spanBetween(from.angle, angle);
    return along > 0 && along < span;
  };
  const between = setting.points.filter(inside);
  const highest = Math.max(...between.map(({ energy }) => energy));
  const fits = (sample: ProfileSample): boolean =>
    inside(sample) && sample.energy >= highest - 1e-3;
  const { exact, shifting } = setting.symmetry;
  const image =
    known.flatMap((sample) => imagesOf(setting, sample, exact)).find(fits) ??
    known.flatMap((sample) => imagesOf(setting, sample, shifting)).find(fits);
  return image ?? refineMaximum(setting.drive, [from, ...between, to], span, control);
}

/** Degrees from one angle up to another, in (0, 360]. */
export function spanBetween(from: number, to: number): number {
  const turn = turnBetween(from, to);
  return turn > 0 ? turn : turn + 360;
}
