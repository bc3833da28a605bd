/** Lines of equal height over a grid of square cells, by marching squares. */

export type Point = readonly [x: number, y: number];

/** Heights at the points (x, y) with 0 ≤ x < width and 0 ≤ y < height. */
export interface HeightField {
  readonly width: number;
  readonly height: number;
  readonly at: (x: number, y: number) => number;
}

/** The lines at one level, in the grid's units, each from end to end or round to its beginning. */
export function contourLines(field: HeightField, level: number): Point[][] {
  const segments: (readonly [Point, Point])[] = [];
  for (let y = 0; y + 1 < field.height; y++) {
    for (let x = 0; x + 1 < field.width; x++) segments.push(...segmentsIn(field, x, y, level));
  }
  return join(segments);
}

/** The pieces of the line that cross the square with its lowest corner at (x, y). */
function segmentsIn(
  { at }: HeightField,
  x: number,
  y: number,
  level: number,
): (readonly [Point, Point])[] {
  const corners: readonly Point[] = [
    [x, y],
    [x + 1, y],
    [x + 1, y + 1],
    [x, y + 1],
  ];
  const heights = corners.map(([cx, cy]) => at(cx, cy));
  const crossings: Point[] = [];
  for (let side = 0; side < 4; side++) {
    const [a, b] = [side, (side + 1) % 4];
    if (heights[a] >= level === heights[b] >= level) continue;
    const share = (level - heights[a]) / (heights[b] - heights[a]);
    crossings.push([
      corners[a][0] + share * (corners[b][0] - corners[a][0]),
      corners[a][1] + share * (corners[b][1] - corners[a][1]),
    ]);
  }
  if (crossings.length === 2) return [[crossings[0], crossings[1]]];
  if (crossings.length < 4) return [];
  // A saddle: the height of the middle says which corners belong together.
  const middle = heights.reduce((sum, height) => sum + height, 0) / 4;
  const [bottom, right, top, left] = crossings;
  return heights[0] >= level === middle >= level
    ? [
        [bottom, right],
        [top, left],
      ]
    : [
        [left, bottom],
        [right, top],
      ];
}

/** Joins pieces that share an end. */
function join(pieces: readonly (readonly [Point, Point])[]): Point[][] {
  const keyOf = ([x, y]: Point): string => `${x.toFixed(6)} ${y.toFixed(6)}`;
  // Where a corner lies exactly at the level, a piece may be a mere point.
  const segments = pieces.filter(([a, b]) => keyOf(a) !== keyOf(b));
  const ends = new Map<string, number[]>();
  segments.forEach((segment, n) => {
    for (const end of segment) {
      const key = keyOf(end);
      ends.set(key, [...(ends.get(key) ?? []), n]);
    }
  });
  const used = new Set<number>();
  /** Goes on from a point over pieces not used yet. */
  const follow = (from: Point): Point[] => {
    const way: Point[] = [];
    let at = from;
    for (;;) {
      const next = ends.get(keyOf(at))?.find((n) => !used.has(n));
      if (next === undefined) return way;
      used.add(next);
      const [a, b] = segments[next];
      at = keyOf(a) === keyOf(at) ? b : a;
      way.push(at);
    }
  };
  const lines: Point[][] = [];
  segments.forEach(([a, b], n) => {
    if (used.has(n)) return;
    used.add(n);
    lines.push([...follow(a).reverse(), a, b, ...follow(b)]);
  });
  return lines;
}
