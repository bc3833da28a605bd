/** Maximum matching in a general graph: Edmonds' blossom algorithm (Can. J. Math. 1965, 17, 449). */

/**
 * Pairs up as many vertices as can be paired along edges. `adjacent` lists each vertex's partners; the answer gives
 * each vertex's partner, -1 where it stays alone. The order of the lists decides between equal matchings.
 */
export function maximumMatching(adjacent: readonly (readonly number[])[]): Int32Array {
  const partner = new Int32Array(adjacent.length).fill(-1);
  for (let vertex = 0; vertex < adjacent.length; vertex++) {
    if (partner[vertex] >= 0) continue;
    const free = adjacent[vertex].find((other) => partner[other] < 0);
    if (free === undefined) continue;
    partner[vertex] = free;
    partner[free] = vertex;
  }
  for (let vertex = 0; vertex < adjacent.length; vertex++) {
    if (partner[vertex] < 0) augment(adjacent, partner, vertex);
  }
  return partner;
}

/** Grows an alternating tree from a lone vertex and, when it meets another one, flips the path between them. */
function augment(
  adjacent: readonly (readonly number[])[],
  partner: Int32Array,
  root: number,
): void {
  const size = adjacent.length;
  const parent = new Int32Array(size).fill(-1);
  const base = Int32Array.from({ length: size }, (_, n) => n);
  const inTree = new Uint8Array(size);
  inTree[root] = 1;
  const queue = [root];
  for (const from of queue) {
    for (const to of adjacent[from]) {
      if (base[from] === base[to] || partner[from] === to) continue;
      if (to === root || (partner[to] >= 0 && parent[partner[to]] >= 0)) {
        shrinkBlossom(partner, parent, base, inTree, queue, from, to);
      } else if (parent[to] < 0) {
        parent[to] = from;
        if (partner[to] < 0) {
          flipPath(partner, parent, to);
          return;
        }
        inTree[partner[to]] = 1;
        queue.push(partner[to]);
      }
    }
  }
}

function flipPath(partner: Int32Array, parent: Int32Array, end: number): void {
  let vertex = end;
  while (vertex >= 0) {
    const previous = parent[vertex];
    const next = partner[previous];
    partner[vertex] = previous;
    partner[previous] = vertex;
    vertex = next;
  }
}

function shrinkBlossom(
  partner: Int32Array,
  parent: Int32Array,
  base: Int32Array,
  inTree: Uint8Array,
  queue: number[],
  from: number,
  to: number,
): void {
  const top = commonBase(partner, parent, base, from, to);
  const inBlossom = new Uint8Array(base.length);
  markPath(partner, parent, base, inBlossom, from, top, to);
  markPath(partner, parent, base, inBlossom, to, top, from);
  for (let vertex = 0; vertex < base.length; vertex++) {
    if (!inBlossom[base[vertex]]) continue;
    base[vertex] = top;
    if (!inTree[vertex]) {
      inTree[vertex] = 1;
      queue.push(vertex);
    }
  }
}

function commonBase(
  partner: Int32Array,
  parent: Int32Array,
  base: Int32Array,
  first: number,
  second: number,
): number {
  const seen = new Uint8Array(base.length);
  let vertex = base[first];
  seen[vertex] = 1;
  while (partner[vertex] >= 0) {
    vertex = base[parent[partner[vertex]]];
    seen[vertex] = 1;
  }
  vertex = base[second];
  while (!seen[vertex]) vertex = base[parent[partner[vertex]]];
  return vertex;
}

function markPath(
  partner: Int32Array,
  parent: Int32Array,
  base: Int32Array,
  inBlossom: Uint8Array,
  start: number,
  top: number,
  child: number,
): void {
  let vertex = start;
  let below = child;
  while (base[vertex] !== top) {
    inBlossom[base[vertex]] = 1;
    inBlossom[base[partner[vertex]]] = 1;
    parent[vertex] = below;
    below = partner[vertex];
    vertex = parent[partner[vertex]];
  }
}
