/** Where the levels of an energy ladder stand: near ones side by side, and labels where there is room for them. */
import { linearScale, roundTicks } from './scale';

export interface LadderLevel {
  /** In the unit that is shown. */
  readonly energy: number;
  /** Length of its stroke, px. */
  readonly length: number;
  /** Labelled before all others. */
  readonly chosen: boolean;
}

/** Levels at nearly one height, drawn one after the other. */
export interface LadderRow {
  /** Positions in the list of levels. */
  readonly members: readonly number[];
  readonly labelled: boolean;
  /** Length of all strokes with the gaps between them, px. */
  readonly length: number;
}

export interface Ladder {
  readonly ticks: readonly number[];
  /** Height of an energy, px from the top. */
  readonly y: (energy: number) => number;
  /** Where each level's stroke begins, px from the first. */
  readonly offsets: readonly number[];
  readonly rows: readonly LadderRow[];
}

/** Levels nearer in height than this would cover each other, px. */
const ONE_ROW = 5;
/** Room that a label needs, px. */
const LABEL_HEIGHT = 15;
/** Between two strokes of a row, px. */
export const STROKE_GAP = 4;

/** Lays the levels, given from the lowest to the highest, between `top` and `bottom` (px). */
export function layLadder(
  levels: readonly LadderLevel[],
  [top, bottom]: readonly [number, number],
): Ladder {
  const ticks = roundTicks(Math.max(0.1, ...levels.map(({ energy }) => energy)));
  const y = linearScale([0, ticks[ticks.length - 1]], [bottom, top]);
  const heights = levels.map(({ energy }) => y(energy));
  const groups = rowsOf(heights);
  const offsets = levels.map(() => 0);
  const lengths = groups.map((members) => {
    let end = 0;
    for (const n of members) {
      offsets[n] = end;
      end += levels[n].length + STROKE_GAP;
    }
    return end;
  });
  const labelled = labelledRows(
    groups.map((members) => heights[members[0]]),
    groups.map((members) => members.some((n) => levels[n].chosen)),
  );
  const rows = groups.map((members, n) => ({
    members,
    length: lengths[n],
    labelled: labelled[n],
  }));
  return { ticks, y, offsets, rows };
}

function rowsOf(heights: readonly number[]): number[][] {
  const rows: number[][] = [];
  heights.forEach((height, n) => {
    const row = rows.at(-1);
    if (row && Math.abs(heights[row[0]] - height) < ONE_ROW) row.push(n);
    else rows.push([n]);
  });
  return rows;
}

function labelledRows(heights: readonly number[], chosen: readonly boolean[]): boolean[] {
  const order = heights
    .map((_, n) => n)
    .sort((a, b) => Number(chosen[b]) - Number(chosen[a]) || a - b);
  const labelled = heights.map(() => false);
  const taken: number[] = [];
  for (const n of order) {
    if (taken.some((other) => Math.abs(other - heights[n]) < LABEL_HEIGHT)) continue;
    taken.push(heights[n]);
    labelled[n] = true;
  }
  return labelled;
}

/** Numbers in a row, runs drawn together: 1–4, 6. */
export function numberRuns(numbers: readonly number[]): string {
  const runs: [number, number][] = [];
  for (const number of numbers) {
    const run = runs.at(-1);
    if (run && run[1] === number - 1) run[1] = number;
    else runs.push([number, number]);
  }
  return runs
    .map(([from, to]) =>
      from === to ? String(from) : `${from}${to === from + 1 ? ', ' : '–'}${to}`,
    )
    .join(', ');
}
