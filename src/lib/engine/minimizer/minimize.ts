/** Minimizes an energy: limited-memory quasi-Newton steps from a curvature that knows the molecule. */
import type { Control } from '../control';
import type { EnergyTerm } from '../energy-term';
import { dot } from './history';
import { searchLine } from './line-search';
import type { LineSearchResult } from './line-search';
import type { MinimizeOptions, MinimizeResult } from './minimizer';
import { separateCoincident } from './separate';
import { swing } from './swing';
import { heldTorsions, returnWorkspace, takeWorkspace } from './workspace';
import type { Place, Workspace } from './workspace';

/** Steps after which the curvature is computed anew. */
const REFRESH_INTERVAL = 12;
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
  separateCoincident(x);
  const workspace = takeWorkspace(x.length, options.skeleton);
  try {
    return await descend(energy, x, options, control, workspace);
  } finally {
    returnWorkspace(workspace);
  }
}

async function descend(
  energy: EnergyTerm,
  x: Float64Array,
  { gradientRms, maxEvaluations, curvature, skeleton, torsions }: MinimizeOptions,
  control: Control,
  workspace: Workspace,
): Promise<MinimizeResult> {
  const size = x.length;
  const { history, preconditioner, curvatureFrames, direction, localDirection, plain } = workspace;
  const held = heldTorsions(workspace, torsions);
  let [current, next] = workspace.places;
  current.x.set(x);
  const found: LineSearchResult = { evaluations: 0, lower: false };
  let lastStep = 0;

  const applyInitial = (vector: Float64Array): void => {
    if (!curvature) return;
    curvatureFrames.gradientFromLocal(vector, plain);
    preconditioner.solve(plain);
    curvatureFrames.stepToLocal(plain, vector);
  };
  const refresh = (): void => {
    curvatureFrames.copy(current.frames);
    if (curvature) preconditioner.refresh(current.x, curvature);
    held?.soften(current.x, current.frames, applyInitial);
  };
  const compute = (place: Place): void => {
    plain.fill(0);
    place.energy = energy(place.x, plain);
    place.gradientRms = held ? held.project(plain) : rootMeanSquare(plain);
    place.frames.place(place.x);
    place.frames.gradientToLocal(plain, place.gradient);
  };
  const stepTo = (step: number): void => {
    lastStep = step;
    swing(skeleton, current.x, step, direction, next.x);
    if (held === null || held.restore(next.x)) compute(next);
    else next.energy = Infinity;
  };
  const aim = (): void => {
    localDirection.set(current.gradient);
    history.apply(localDirection, applyInitial);
    current.frames.stepFromLocal(localDirection, direction);
    held?.flatten(direction);
    for (let a = 0; a < size; a++) direction[a] = -direction[a];
    current.frames.stepToLocal(direction, localDirection);
  };

  current.frames.place(current.x);
  refresh();
  for (let turns = 0; held && turns < MOST_TURNS; turns++) {
    held.linearize(current.x, current.frames);
    if (held.restore(current.x)) break;
    current.frames.place(current.x);
    refresh();
  }
  compute(current);
  let evaluations = 1;
  let sinceRefresh = 0;
  let restarted = false;
  while (current.gradientRms > gradientRms && evaluations < maxEvaluations) {
    if (control.due()) await control.pause();
    if (sinceRefresh >= REFRESH_INTERVAL) {
      refresh();
      sinceRefresh = 0;
    }
    sinceRefresh++;
    held?.linearize(current.x, current.frames);
    aim();
    if (dot(localDirection, current.gradient) < 0) {
      const largestStep = LONGEST_STEP / longestMove(direction);
      searchLine(stepTo, current, localDirection, 1, largestStep, next, found);
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
    history.remember(localDirection, lastStep, current.gradient, next.gradient);
    [current, next] = [next, current];
  }
  x.set(current.x);
  const isHeld = held === null || held.deviation(x) <= HELD_TOLERANCE;
  return {
    energy: current.energy,
    converged: current.gradientRms <= gradientRms && isHeld,
    gradientRms: current.gradientRms,
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
