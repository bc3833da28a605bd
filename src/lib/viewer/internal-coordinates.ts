/**
 * A molecule as a tree that grows from the middle bond of a torsion: each atom is placed by a distance, an angle and a
 * torsion from three atoms placed before it (Parsons et al., J. Comput. Chem. 2005, 26, 1063). Turning a bond changes one
 * number and carries along all that hangs on it, so shapes between two known ones keep their bond lengths.
 */
import { angle, distance, toRadians, torsion } from '$lib/engine/light';

/** What bonds a molecule has; atoms from 0. */
export interface Skeleton {
  readonly symbols: readonly string[];
  /** Pairs of atoms with the order of their bond. */
  readonly bonds: readonly (readonly [number, number, number])[];
}

/** How an atom is placed: bonded to `parent`, at an angle with `second`, turned against `third`. */
export interface Placement {
  readonly atom: number;
  readonly parent: number;
  readonly second: number;
  readonly third: number;
  /** Turns a bond of the chain; false where it keeps its place beside a sibling that does. */
  readonly turns: boolean;
}

export interface PlacementTree {
  /** i, j, k, l of the torsion. */
  readonly torsion: readonly number[];
  /** In the order of placing, without the torsion's i, j and k, which make the frame. */
  readonly placements: readonly Placement[];
}

/** Three atoms nearer to a line than this do not fix a direction, degrees. */
const STRAIGHT_WITHIN = 12;

/** The atoms bonded to each atom. */
export function neighborsOf({ symbols, bonds }: Skeleton): number[][] {
  const neighbors: number[][] = symbols.map(() => []);
  for (const [a, b] of bonds) {
    neighbors[a].push(b);
    neighbors[b].push(a);
  }
  return neighbors;
}

/** Grows the tree so that every reference is well bent in all the geometries (Å, 3N) it will describe. */
export function growTree(
  skeleton: Skeleton,
  [i, j, k, l]: readonly number[],
  geometries: readonly Float64Array[],
): PlacementTree {
  const neighbors = neighborsOf(skeleton);
  const isBent = (a: number, b: number, c: number): boolean =>
    geometries.every((x) => Math.abs(90 - angle(x, a, b, c)) < 90 - STRAIGHT_WITHIN);
  const parents = new Map([
    [j, k],
    [k, j],
    [i, j],
  ]);
  const placed = [j, k, i];
  const placements: Placement[] = [];
  /** An atom of those placed that fixes a direction about the line from parent to second. */
  const thirdFor = (parent: number, second: number): number =>
    [parents.get(second)!, ...neighbors[second], ...placed].find(
      (atom) =>
        atom !== parent && atom !== second && placed.includes(atom) && isBent(parent, second, atom),
    ) ?? i;
  const place = (atom: number, parent: number, leader: number | null): void => {
    const second = parents.get(parent)!;
    const beside = leader !== null && isBent(parent, second, leader);
    const third = beside ? leader : parent === k ? i : thirdFor(parent, second);
    placements.push({ atom, parent, second, third, turns: !beside });
    parents.set(atom, parent);
    placed.push(atom);
  };
  place(l, k, null);
  for (let n = 0; n < placed.length; n++) {
    const parent = placed[n];
    const own = parent === j ? i : parent === k ? l : null;
    let leader = own;
    for (const atom of neighbors[parent]) {
      if (parents.has(atom)) continue;
      place(atom, parent, leader);
      leader ??= atom;
    }
  }
  // Parts that no bond connects keep their place beside the torsion.
  skeleton.symbols.forEach((_symbol, atom) => {
    if (!parents.has(atom)) place(atom, j, i);
  });
  return { torsion: [i, j, k, l], placements };
}

/** The numbers of a geometry in a tree: distance (Å), angle and torsion (degrees) of each placement, after the frame's three. */
export function measure(tree: PlacementTree, x: Float64Array): Float64Array {
  const { torsion: own, placements } = tree;
  const [i, j, k] = own;
  const numbers = new Float64Array(3 + 3 * placements.length);
  numbers.set([distance(x, j, k), distance(x, j, i), angle(x, i, j, k)]);
  placements.forEach(({ atom, parent, second, third }, n) => {
    numbers[3 + 3 * n] = distance(x, atom, parent);
    numbers[4 + 3 * n] = angle(x, atom, parent, second);
    numbers[5 + 3 * n] = torsion(x, atom, parent, second, third);
  });
  return numbers;
}

/**
 * Builds the geometry into `x` (Å, 3N) from a tree's numbers, in the frame of the Newman projection: the bond j-k along z
 * with its middle at the origin, i in the plane of y, upwards.
 */
export function build(tree: PlacementTree, numbers: ArrayLike<number>, x: Float64Array): void {
  const [i, j, k] = tree.torsion;
  const half = numbers[0] / 2;
  const bend = toRadians(numbers[2]);
  x.set([0, 0, -half], 3 * j);
  x.set([0, 0, half], 3 * k);
  x.set([0, numbers[1] * Math.sin(bend), -half + numbers[1] * Math.cos(bend)], 3 * i);
  tree.placements.forEach(({ atom, parent, second, third }, n) =>
    setAtom(x, atom, parent, second, third, numbers, 3 + 3 * n),
  );
}

/** Places one atom from its three references. */
function setAtom(
  x: Float64Array,
  atom: number,
  parent: number,
  second: number,
  third: number,
  numbers: ArrayLike<number>,
  at: number,
): void {
  const [p, s, t] = [3 * parent, 3 * second, 3 * third];
  // The direction from second to parent, and the normal of the plane of the three references.
  let [bx, by, bz] = [x[p] - x[s], x[p + 1] - x[s + 1], x[p + 2] - x[s + 2]];
  const [ax, ay, az] = [x[s] - x[t], x[s + 1] - x[t + 1], x[s + 2] - x[t + 2]];
  const length = Math.hypot(bx, by, bz);
  bx /= length;
  by /= length;
  bz /= length;
  let [nx, ny, nz] = [ay * bz - az * by, az * bx - ax * bz, ax * by - ay * bx];
  const size = Math.hypot(nx, ny, nz);
  nx /= size;
  ny /= size;
  nz /= size;
  const [mx, my, mz] = [ny * bz - nz * by, nz * bx - nx * bz, nx * by - ny * bx];
  const bend = toRadians(numbers[at + 1]);
  const turn = toRadians(numbers[at + 2]);
  const back = -numbers[at] * Math.cos(bend);
  const side = numbers[at] * Math.sin(bend) * Math.cos(turn);
  const up = numbers[at] * Math.sin(bend) * Math.sin(turn);
  x[3 * atom] = x[p] + back * bx + side * mx + up * nx;
  x[3 * atom + 1] = x[p + 1] + back * by + side * my + up * ny;
  x[3 * atom + 2] = x[p + 2] + back * bz + side * mz + up * nz;
}
