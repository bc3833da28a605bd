/** The order in which a sparse symmetric matrix is best eliminated, and where elimination fills it. */

/** The plan of a block Cholesky factorization: one row and column for each atom, blocks of 3 × 3. */
export interface EliminationPlan {
  /** Atom eliminated at each step. */
  readonly order: Int32Array;
  /** Blocks of step c: places columnStarts[c] to columnStarts[c + 1] - 1, the diagonal block first. */
  readonly columnStarts: Int32Array;
  /** The step at which each block's row is eliminated, ascending within a column. */
  readonly rows: Int32Array;
  /** The same rows as offsets into vectors: 3 × the atom eliminated at that step. */
  readonly rowOffsets: Int32Array;
  /** For each column, each pair of its rows r ≥ s below the diagonal (s outer, r inner): the place of block (r, s). */
  readonly targets: Int32Array;
}

/**
 * Plans the elimination by minimum degree (Tinney and Walker, Proc. IEEE 1967, 55, 1801): always the atom with the fewest
 * neighbors left, the first among equals. `coupled` (atoms × atoms, both triangles) is nonzero where atoms are coupled.
 */
export function planElimination(coupled: Readonly<Uint8Array>, atoms: number): EliminationPlan {
  const graph = Uint8Array.from(coupled);
  const degrees = new Int32Array(atoms);
  for (let a = 0; a < atoms; a++) {
    graph[a * atoms + a] = 0;
    for (let b = 0; b < atoms; b++) if (graph[a * atoms + b] !== 0) degrees[a]++;
  }
  const order = new Int32Array(atoms);
  const steps = new Int32Array(atoms).fill(-1);
  const columns: number[][] = [];
  for (let c = 0; c < atoms; c++) {
    const pivot = fewestNeighbors(degrees, steps);
    steps[pivot] = c;
    order[c] = pivot;
    columns.push(eliminate(graph, degrees, atoms, pivot));
  }
  return layOut(order, steps, columns);
}

function fewestNeighbors(degrees: Int32Array, steps: Int32Array): number {
  let best = -1;
  for (let a = 0; a < degrees.length; a++) {
    if (steps[a] === -1 && (best === -1 || degrees[a] < degrees[best])) best = a;
  }
  return best;
}

/** Takes an atom out of the graph, which couples all its neighbors with each other; returns them. */
function eliminate(graph: Uint8Array, degrees: Int32Array, atoms: number, pivot: number): number[] {
  const neighbors: number[] = [];
  for (let a = 0; a < atoms; a++) if (graph[pivot * atoms + a] !== 0) neighbors.push(a);
  for (const a of neighbors) {
    graph[a * atoms + pivot] = 0;
    degrees[a]--;
    for (const b of neighbors) {
      if (a === b || graph[a * atoms + b] !== 0) continue;
      graph[a * atoms + b] = 1;
      degrees[a]++;
    }
  }
  return neighbors;
}

function layOut(
  order: Int32Array,
  steps: Int32Array,
  columns: readonly number[][],
): EliminationPlan {
  const atoms = order.length;
  const columnStarts = new Int32Array(atoms + 1);
  const rowLists = columns.map((column) => column.map((atom) => steps[atom]).sort((a, b) => a - b));
  rowLists.forEach((list, c) => (columnStarts[c + 1] = columnStarts[c] + 1 + list.length));
  const rows = Int32Array.from(rowLists.flatMap((list, c) => [c, ...list]));
  const places = new Int32Array(atoms);
  const targets: number[] = [];
  for (const list of rowLists) {
    for (let n = 0; n < list.length; n++) {
      const s = list[n];
      for (let p = columnStarts[s]; p < columnStarts[s + 1]; p++) places[rows[p]] = p;
      for (let m = n; m < list.length; m++) targets.push(places[list[m]]);
    }
  }
  const rowOffsets = rows.map((row) => 3 * order[row]);
  return { order, columnStarts, rows, rowOffsets, targets: Int32Array.from(targets) };
}
