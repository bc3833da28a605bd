/** Minimizes an energy: limited-memory quasi-Newton steps from a curvature that knows the molecule. */
import type { Control } from '../control';
import type { EnergyTerm } from '../energy-term';
import { createHistory, dot } from './history';
import { holdTorsions } from './held-torsions';
import { searchLine } from './line-search';
import type { LineSearchResult, Point } from './line-search';
import type { MinimizeOptions, MinimizeResult } from './minimizer';
import { createPreconditioner } from './preconditioner';
import { separateCoincident } from './separate';

/** Pairs of steps and gradient changes remembered. */
const MEMORY = 7;
/** Steps after which the curvature is computed anew. */
const REFRESH_INTERVAL = 6;
/** Longest way an atom may go in one step, Å: beyond it the local picture of the energy is worth nothing. */
const LONGEST_STEP = 0.2;

/** Approaches to the targets of held torsions from a start that is far from them. */
const MOST_TURNS = 30;
/** Farthest a held torsion may be from its target in a converged result, degrees. */
const HELD_TOLERANCE = 1e-3;

/**
 * Moves `x` (Å, 3N) in place downhill to where the root mean square gradient is at most `options.gradientRms`
 * (kcal/mol/Å). Pauses by `control`, and throws only when the control does. Where it stops unconverged, the result says
 * so and `x` is the lowest point reached. Atoms on top of each other are taken apart first.
 */
export async function minimize(
  energy: EnergyTerm,
  x: Float64Array,
  options: MinimizeOptions,
  control: Control,
): Promise<MinimizeResult> {
  const size = x.length;
  separateCoincident(x);
  const { gradientRms, maxEvaluations, curvature, torsions } = options;
  const history = createHistory(size, MEMORY);
  const preconditioner = curvature ? createPreconditioner(curvature, size) : null;
  const held = torsions && torsions.length > 0 ? holdTorsions(torsions, size) : null;
  const direction = new Float64Array(size);
  const found: LineSearchResult = { evaluations: 0, lower: false };
  let current: Point = { x: x.slice(), gradient: new Float64Array(size), energy: 0 };
  let next: Point = { x: x.slice(), gradient: new Float64Array(size), energy: 0 };
  const applyInitial = (vector: Float64Array): void => preconditioner?.solve(vector);
  const compute = (point: Point): void => {
    point.gradient.fill(0);
    point.energy = energy(point.x, point.gradient);
    held?.project(point.x, point.gradient);
  };
  const reachedBy = ({ x: at, gradient }: Point): number =>
    held ? held.tangentRms(at, gradient) : rootMeanSquare(gradient);
  const stepTo = (step: number): void => {
    for (let a = 0; a < size; a++) next.x[a] = current.x[a] + step * direction[a];
    if (held === null || held.restore(next.x)) compute(next);
    else next.energy = Infinity;
  };

  preconditioner?.refresh(current.x);
  for (let turns = 0; held && turns < MOST_TURNS; turns++) {
    held.linearize(current.x, applyInitial);
    if (held.restore(current.x)) break;
    preconditioner?.refresh(current.x);
  }
  compute(current);
  let evaluations = 1;
  let sinceRefresh = 0;
  let restarted = false;
  while (reachedBy(current) > gradientRms && evaluations < maxEvaluations) {
    if (control.due()) await control.pause();
    if (sinceRefresh >= REFRESH_INTERVAL) {
      preconditioner?.refresh(current.x);
      sinceRefresh = 0;
    }
    sinceRefresh++;
    held?.linearize(current.x, applyInitial);
    held?.project(current.x, current.gradient);
    direction.set(current.gradient);
    history.apply(direction, applyInitial);
    held?.flatten(direction);
    for (let a = 0; a < size; a++) direction[a] = -direction[a];
    if (dot(direction, current.gradient) < 0) {
      const largestStep = LONGEST_STEP / longestMove(direction);
      searchLine(stepTo, current, direction, 1, largestStep, next, found);
      evaluations += found.evaluations;
    } else found.lower = false;
    if (!found.lower) {
      // The memory no longer fits the place: try once more from the bare curvature before giving up.
      if (restarted) break;
      restarted = true;
      history.clear();
      sinceRefresh = REFRESH_INTERVAL;
      continue;
    }
    restarted = false;
    history.remember(current.x, next.x, current.gradient, next.gradient);
    [current, next] = [next, current];
  }
  x.set(current.x);
  const reached = reachedBy(current);
  const isHeld = held === null || held.deviation(x) <= HELD_TOLERANCE;
  return {
    energy: current.energy,
    converged: reached <= gradientRms && isHeld,
    gradientRms: reached,
    evaluations,
  };
}

/** Root mean square of a vector's components. */
export function rootMeanSquare(vector: Float64Array): number {
  return Math.sqrt(dot(vector, vector) / vector.length);
}

/** The longest way any atom goes, Å. */
function longestMove(direction: Float64Array): number {
  let longest = 1e-300;
  for (let a = 0; a < direction.length; a += 3) {
    const dx = direction[a];
    const dy = direction[a + 1];
    const dz = direction[a + 2];
    longest = Math.max(longest, dx * dx + dy * dy + dz * dz);
  }
  return Math.sqrt(longest);
}
