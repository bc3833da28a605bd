/** Ring perception: which bonds lie in rings, and a smallest set of smallest rings. */
import type { Bond, Neighbor } from './molecule';

/**
 * Per bond, 1 when it lies in a ring of any size: the bonds that are not bridges of the graph (Tarjan,
 * Inf. Process. Lett. 1974, 2, 160), found in one depth-first walk that needs no recursion.
 */
export function findRingBonds(
  neighbors: readonly (readonly Neighbor[])[],
  bonds: readonly Bond[],
): Uint8Array {
  const inRing = new Uint8Array(bonds.length).fill(1);
  const visited = new Int32Array(neighbors.length).fill(-1);
  const lowest = new Int32Array(neighbors.length);
  let time = 0;
  for (let root = 0; root < neighbors.length; root++) {
    if (visited[root] >= 0) continue;
    const stack = [{ atom: root, by: -1, next: 0 }];
    visited[root] = lowest[root] = time++;
    while (stack.length > 0) {
      const step = stack[stack.length - 1];
      if (step.next < neighbors[step.atom].length) {
        const { atom, bond } = neighbors[step.atom][step.next++];
        if (bond === step.by) continue;
        if (visited[atom] >= 0) {
          lowest[step.atom] = Math.min(lowest[step.atom], visited[atom]);
        } else {
          visited[atom] = lowest[atom] = time++;
          stack.push({ atom, by: bond, next: 0 });
        }
        continue;
      }
      stack.pop();
      if (stack.length === 0) break;
      const parent = stack[stack.length - 1].atom;
      lowest[parent] = Math.min(lowest[parent], lowest[step.atom]);
      if (lowest[step.atom] > visited[parent]) inRing[step.by] = 0;
    }
  }
  return inRing;
}

interface Candidate {
  readonly atoms: readonly number[];
  readonly bonds: readonly number[];
}

/** Shortest paths from one atom over ring bonds: the bond towards the root and the distance, -1 where unreached. */
function shortestPaths(
  root: number,
  neighbors: readonly (readonly Neighbor[])[],
  ringBonds: Readonly<Uint8Array>,
): { parent: Int32Array; by: Int32Array; far: Int32Array } {
  const parent = new Int32Array(neighbors.length).fill(-1);
  const by = new Int32Array(neighbors.length).fill(-1);
  const far = new Int32Array(neighbors.length).fill(-1);
  far[root] = 0;
  const queue = [root];
  for (const current of queue) {
    for (const { atom, bond } of neighbors[current]) {
      if (!ringBonds[bond] || far[atom] >= 0) continue;
      far[atom] = far[current] + 1;
      parent[atom] = current;
      by[atom] = bond;
      queue.push(atom);
    }
  }
  return { parent, by, far };
}

/** Turns a ring so that it starts at its lowest atom and goes on to that atom's lower neighbor. */
function normalized(atoms: readonly number[]): number[] {
  const start = atoms.indexOf(Math.min(...atoms));
  const size = atoms.length;
  const forward = atoms[(start + 1) % size] < atoms[(start + size - 1) % size];
  return atoms.map((_, n) => atoms[(start + (forward ? n : size - n)) % size]);
}

function compareRings(left: Candidate, right: Candidate): number {
  if (left.atoms.length !== right.atoms.length) return left.atoms.length - right.atoms.length;
  const at = left.atoms.findIndex((atom, n) => atom !== right.atoms[n]);
  return at < 0 ? 0 : left.atoms[at] - right.atoms[at];
}

/** Every ring made of a bond and the shortest paths from its ends to an atom (Horton's candidates). */
function ringCandidates(
  neighbors: readonly (readonly Neighbor[])[],
  bonds: readonly Bond[],
  ringBonds: Readonly<Uint8Array>,
): Candidate[] {
  const found = new Map<string, Candidate>();
  const onWay = new Int32Array(neighbors.length).fill(-1);
  let way = 0;
  for (let root = 0; root < neighbors.length; root++) {
    if (!neighbors[root].some(({ bond }) => ringBonds[bond])) continue;
    const { parent, by, far } = shortestPaths(root, neighbors, ringBonds);
    for (let n = 0; n < bonds.length; n++) {
      const { a, b } = bonds[n];
      if (!ringBonds[n] || far[a] < 0 || by[a] === n || by[b] === n) continue;
      way++;
      const first: number[] = [];
      const ring: number[] = [n];
      for (let atom = a; atom !== root; atom = parent[atom]) {
        first.push(atom);
        ring.push(by[atom]);
        onWay[atom] = way;
      }
      const second: number[] = [];
      let atom = b;
      for (; atom !== root && onWay[atom] !== way; atom = parent[atom]) {
        second.push(atom);
        ring.push(by[atom]);
      }
      if (atom !== root) continue;
      const atoms = normalized([root, ...first.reverse(), ...second]);
      const key = atoms.join(',');
      if (!found.has(key)) found.set(key, { atoms, bonds: ring });
    }
  }
  return [...found.values()].sort(compareRings);
}

/**
 * A smallest set of smallest rings, each as its atoms in order round the ring, by Horton's algorithm (SIAM J. Comput.
 * 1987, 16, 358): candidates by rising size, kept when independent of the smaller ones over GF(2). Where several sets
 * are equally small the one with the lowest atom numbers is returned, so the answer is reproducible.
 */
export function findRings(
  neighbors: readonly (readonly Neighbor[])[],
  bonds: readonly Bond[],
  ringBonds: Readonly<Uint8Array>,
): number[][] {
  const wanted = cyclomaticNumber(neighbors, ringBonds);
  const rings: number[][] = [];
  if (wanted === 0) return rings;
  // Reduced rows of the elimination by their leading bond, as bit sets of 32-bit words.
  const words = (bonds.length + 31) >> 5;
  const rows = new Map<number, Uint32Array>();
  for (const candidate of ringCandidates(neighbors, bonds, ringBonds)) {
    const row = new Uint32Array(words);
    for (const bond of candidate.bonds) row[bond >> 5] |= 1 << (bond & 31);
    if (!addIndependent(rows, row)) continue;
    rings.push([...candidate.atoms]);
    if (rings.length === wanted) break;
  }
  return rings;
}

/** Reduces the row by those known and keeps it; false when nothing is left of it. */
function addIndependent(rows: Map<number, Uint32Array>, row: Uint32Array): boolean {
  for (let word = 0; word < row.length; word++) {
    while (row[word] !== 0) {
      const lead = (word << 5) + 31 - Math.clz32(row[word] & -row[word]);
      const known = rows.get(lead);
      if (!known) {
        rows.set(lead, row);
        return true;
      }
      for (let n = word; n < row.length; n++) row[n] ^= known[n];
    }
  }
  return false;
}

/** How many independent rings there are: bonds − atoms + connected parts. */
function cyclomaticNumber(
  neighbors: readonly (readonly Neighbor[])[],
  ringBonds: Readonly<Uint8Array>,
): number {
  const seen = new Uint8Array(neighbors.length);
  let ends = 0;
  let atoms = 0;
  let parts = 0;
  for (let root = 0; root < neighbors.length; root++) {
    if (seen[root]) continue;
    parts++;
    seen[root] = 1;
    const queue = [root];
    for (const current of queue) {
      atoms++;
      for (const { atom, bond } of neighbors[current]) {
        if (!ringBonds[bond]) continue;
        ends++;
        if (seen[atom]) continue;
        seen[atom] = 1;
        queue.push(atom);
      }
    }
  }
  return ends / 2 - atoms + parts;
}
