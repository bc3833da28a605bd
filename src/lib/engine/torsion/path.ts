/** Minima of a two-bond map and the lowest way between them, on the grid and periodic in both directions. */

/** Energies over a periodic grid, kcal/mol, row by row: `energies[row * columns + column]`. */
export interface EnergyGrid {
  readonly rows: number;
  readonly columns: number;
  readonly energies: ArrayLike<number>;
}

/** A way over the grid from cell to cell. */
export interface GridPath {
  /** Cells from start to end, each row * columns + column. */
  readonly cells: readonly number[];
  /** The highest cell of the way, and its energy in kcal/mol. */
  readonly pass: number;
  readonly passEnergy: number;
}

/** Cells not higher than any of their eight neighbors, lowest first; of a level patch the first cell stands for all. */
export function gridMinima(grid: EnergyGrid): number[] {
  const minima: number[] = [];
  const onKnownPatch = new Uint8Array(grid.energies.length);
  for (let cell = 0; cell < grid.energies.length; cell++) {
    if (onKnownPatch[cell] === 0 && isFloor(grid, cell, onKnownPatch)) minima.push(cell);
  }
  return minima.sort((a, b) => grid.energies[a] - grid.energies[b] || a - b);
}

/** Walks the level patch a cell lies on; true when nothing round the patch is lower. */
function isFloor(grid: EnergyGrid, start: number, visited: Uint8Array): boolean {
  const level = grid.energies[start];
  const patch = [start];
  visited[start] = 1;
  let floor = true;
  for (let cell = patch.pop(); cell !== undefined; cell = patch.pop()) {
    for (const other of cellsAround(grid, cell, true)) {
      const energy = grid.energies[other];
      if (energy < level) floor = false;
      if (energy === level && visited[other] === 0) {
        visited[other] = 1;
        patch.push(other);
      }
    }
  }
  return floor;
}

/**
 * The way from one cell to another whose highest cell is as low as can be (a minimax path); of several such ways the one
 * with the lowest sum of energies above the start, so that it follows the valleys. Dijkstra's algorithm (Numer. Math. 1959, 1,
 * 269) with the pair (highest, sum) as the length. Steps go to the four cells that share an edge: one bond turns at a time.
 */
export function lowestPath(grid: EnergyGrid, from: number, to: number): GridPath {
  const count = grid.energies.length;
  const base = minimum(grid.energies);
  const highest = new Float64Array(count).fill(Infinity);
  const sum = new Float64Array(count).fill(Infinity);
  const previous = new Int32Array(count).fill(-1);
  const done = new Uint8Array(count);
  highest[from] = grid.energies[from];
  sum[from] = 0;
  for (let cell = from; cell !== to; cell = nearestOpen(highest, sum, done)) {
    done[cell] = 1;
    for (const other of cellsAround(grid, cell, false)) {
      const energy = grid.energies[other];
      const newHighest = Math.max(highest[cell], energy);
      const newSum = sum[cell] + energy - base;
      const better =
        newHighest < highest[other] || (newHighest === highest[other] && newSum < sum[other]);
      if (done[other] === 1 || !better) continue;
      highest[other] = newHighest;
      sum[other] = newSum;
      previous[other] = cell;
    }
  }
  const cells: number[] = [];
  for (let cell = to; cell !== -1; cell = previous[cell]) cells.unshift(cell);
  const pass = cells.reduce((top, cell) => (grid.energies[cell] > grid.energies[top] ? cell : top));
  return { cells, pass, passEnergy: grid.energies[pass] };
}

/** The open cell with the least (highest, sum); maps have a few hundred cells, so a plain search does. */
function nearestOpen(highest: Float64Array, sum: Float64Array, done: Uint8Array): number {
  let best = -1;
  for (let cell = 0; cell < done.length; cell++) {
    if (done[cell] === 1 || highest[cell] === Infinity) continue;
    const nearer =
      best === -1 ||
      highest[cell] < highest[best] ||
      (highest[cell] === highest[best] && sum[cell] < sum[best]);
    if (nearer) best = cell;
  }
  return best;
}

/** The four cells that share an edge with a cell, and on request the four that share a corner. */
function cellsAround(grid: EnergyGrid, cell: number, corners: boolean): number[] {
  const { rows, columns } = grid;
  const row = Math.floor(cell / columns);
  const column = cell % columns;
  const at = (down: number, right: number): number =>
    ((row + down + rows) % rows) * columns + ((column + right + columns) % columns);
  const edges = [at(-1, 0), at(1, 0), at(0, -1), at(0, 1)];
  return corners ? [...edges, at(-1, -1), at(-1, 1), at(1, -1), at(1, 1)] : edges;
}

function minimum(values: ArrayLike<number>): number {
  let lowest = Infinity;
  for (let i = 0; i < values.length; i++) lowest = Math.min(lowest, values[i]);
  return lowest;
}
