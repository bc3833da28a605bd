/** How a map of two bonds is drawn: bands of energy, lines between them with their numbers, and ways over the grid. */
import { contourLines, type Point } from './contours';
import { axisAngle, refine, type MapEnergies } from './fine-grid';
import { linearScale, roundTicks } from './scale';

export interface MapBand {
  /** Place on the energy scale, 0 to 1. */
  readonly share: number;
  /** Energies of the band, in the unit of the map; the last one has no upper end. */
  readonly from: number;
  readonly to: number | null;
  readonly path: string;
}

export interface MapContour {
  readonly level: number;
  readonly path: string;
  /** Where its number is written; null where the line is too short for it. */
  readonly label: Point | null;
}

export interface MapLayout {
  readonly bands: readonly MapBand[];
  readonly contours: readonly MapContour[];
}

/** Degrees between two points of the drawn surface. */
const FINENESS = 2.5;
const LEVELS = 8;
/** The share of cells that the scale covers; above lie contacts of atoms, whose height says nothing. */
const COVERED = 0.9;
/** Points of a line that bears a number. */
const LABELLED_LENGTH = 24;
/** Two numbers are at least so far apart, in px. */
const LABEL_DISTANCE = 26;

/** The round energies at which bands meet, the last at least as high as most cells. */
export function mapLevels({ energies }: MapEnergies): number[] {
  const reached = energies.flatMap((energy) => energy ?? []).sort((a, b) => a - b);
  const top = reached.at(Math.floor(COVERED * (reached.length - 1))) ?? 0;
  return roundTicks(Math.max(0.1, top), LEVELS).slice(1);
}

/** Lays a map on a square of `size` px: the first angle to the right, the second upward. */
export function layMap(map: MapEnergies, size: number): MapLayout {
  const fine = refine(map, FINENESS);
  const scale = size / (fine.perAxis - 1);
  const levels = mapLevels(map);
  const field = { width: fine.perAxis, height: fine.perAxis, at: fine.at };
  const place = ([x, y]: Point): Point => [x * scale, size - y * scale];
  const taken: Point[] = [];
  const contours = levels.map((level): MapContour => {
    const lines = contourLines(field, level).map((line) => line.map(place));
    return {
      level,
      path: lines.map((line) => `M${line.map(written).join('L')}`).join(''),
      label: labelPlace(lines, taken, size),
    };
  });
  return { bands: bandsOf(field, levels, size), contours };
}

/** Strips of squares row by row; one path for each band. */
function bandsOf(
  { width, height, at }: { width: number; height: number; at: (x: number, y: number) => number },
  levels: readonly number[],
  size: number,
): MapBand[] {
  const scale = size / (width - 1);
  const paths = Array.from({ length: levels.length + 1 }, () => '');
  const bandAt = (x: number, y: number): number => {
    const middle = (at(x, y) + at(x + 1, y) + at(x, y + 1) + at(x + 1, y + 1)) / 4;
    const band = levels.findIndex((level) => middle < level);
    return band === -1 ? levels.length : band;
  };
  for (let y = 0; y + 1 < height; y++) {
    let start = 0;
    for (let x = 0; x + 1 < width; x++) {
      const band = bandAt(x, y);
      if (x + 2 < width && bandAt(x + 1, y) === band) continue;
      const [left, top] = [start * scale, size - (y + 1) * scale];
      paths[band] +=
        `M${written([left, top])}h${short((x + 1 - start) * scale)}v${short(scale)}H${short(left)}z`;
      start = x + 1;
    }
  }
  return paths.map((path, n) => ({
    share: n / levels.length,
    from: n === 0 ? 0 : levels[n - 1],
    to: levels[n] ?? null,
    path,
  }));
}

/** The middle of the longest line where its number stands free of others and of the rim; takes the place. */
function labelPlace(
  lines: readonly (readonly Point[])[],
  taken: Point[],
  size: number,
): Point | null {
  const [longest] = [...lines].sort((a, b) => b.length - a.length);
  if (!longest || longest.length < LABELLED_LENGTH) return null;
  const isFree = ([x, y]: Point): boolean =>
    Math.min(x, y, size - x, size - y) > LABEL_DISTANCE / 2 &&
    taken.every((other) => Math.hypot(x - other[0], y - other[1]) > LABEL_DISTANCE);
  const middle = Math.floor(longest.length / 2);
  const found = longest
    .map((_, n) => longest[(middle + n) % longest.length])
    .find((point) => isFree(point));
  if (found) taken.push(found);
  return found ?? null;
}

/** A way over the grid as a path; a step over the rim leaves on one side and comes in on the other. */
export function wayPath(
  map: Pick<MapEnergies, 'perAxis' | 'step'>,
  cells: readonly number[],
  size: number,
): string {
  const x = linearScale([-180, 180], [0, size]);
  const angles = cells.map((cell): Point => [
    axisAngle(map, Math.floor(cell / map.perAxis)),
    axisAngle(map, cell % map.perAxis),
  ]);
  let path = '';
  angles.forEach(([first, second], n) => {
    const [beforeFirst, beforeSecond] = angles[n - 1] ?? [first, second];
    const [wraps, wrapsUp] = [turns(beforeFirst, first), turns(beforeSecond, second)];
    if (n > 0 && (wraps !== 0 || wrapsUp !== 0)) {
      path += `L${written([x(first - 360 * wraps), size - x(second - 360 * wrapsUp)])}`;
      path += `M${written([x(beforeFirst + 360 * wraps), size - x(beforeSecond + 360 * wrapsUp)])}`;
    }
    path += `${n === 0 ? 'M' : 'L'}${written([x(first), size - x(second)])}`;
  });
  return path;
}

/** How often a step from one angle to the next goes round the circle: 1 downward over 180, -1 upward over -180. */
function turns(from: number, to: number): number {
  return Math.abs(to - from) <= 180 ? 0 : Math.sign(to - from);
}

const short = (value: number): string => String(Number(value.toFixed(1)));
const written = ([x, y]: Point): string => `${short(x)} ${short(y)}`;
