/** Renumberings of a molecule onto itself, all of them or only those under which two geometries agree. */
import { distance } from '../geometry';
import type { VisibleGraph } from './visible-graph';

/** Two geometries whose distances must agree within a tolerance, Å. */
export interface DistanceTest {
  readonly from: Float64Array;
  readonly to: Float64Array;
  readonly tolerance: number;
}

/** Places tried in one enumeration before it gives up. */
const MOST_TRIALS = 400_000;

/**
 * Calls `visit` with every renumbering of the visible atoms that keeps bonds and symmetry classes and, with `test`,
 * the distances: image[place] is the atom to which order[place] goes. `image` is reused. Stops when `visit`
 * answers false; answers false itself when there were too many to go through.
 */
export function forEachMatching(
  graph: VisibleGraph,
  test: DistanceTest | null,
  visit: (image: Int32Array) => boolean,
): boolean {
  const { order, parents, earlier, adjacent, classes } = graph;
  const count = order.length;
  const image = new Int32Array(count).fill(-1);
  const used = new Set<number>();
  const roots = Array.from(order).filter((atom) => classes[atom] === classes[order[0]]);
  let trials = 0;
  let stopped = false;

  const fits = (place: number, candidate: number): boolean => {
    const atom = order[place];
    if (used.has(candidate) || classes[candidate] !== classes[atom]) return false;
    for (const other of earlier[place]) {
      if (!adjacent[candidate].includes(image[other])) return false;
    }
    if (!test) return true;
    for (let other = place - 1; other >= 0; other--) {
      const before = distance(test.from, atom, order[other]);
      const after = distance(test.to, candidate, image[other]);
      if (Math.abs(before - after) > test.tolerance) return false;
    }
    return true;
  };

  const extend = (place: number): void => {
    if (place === count) {
      stopped = !visit(image);
      return;
    }
    const candidates = place === 0 ? roots : adjacent[image[parents[place]]];
    for (const candidate of candidates) {
      if (stopped || trials++ > MOST_TRIALS) return;
      if (!fits(place, candidate)) continue;
      image[place] = candidate;
      used.add(candidate);
      extend(place + 1);
      used.delete(candidate);
    }
  };
  extend(0);
  return trials <= MOST_TRIALS;
}
