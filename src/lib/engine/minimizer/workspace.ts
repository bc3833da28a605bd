/**
 * The arrays of a minimization. A scan minimizes thousands of times, and for a small molecule making the arrays would take
 * as long as a third of the steps; so those of the minimization that ended last are handed to the next one of the same molecule.
 */
import type { Skeleton } from '../molecule/skeleton';
import { holdTorsions } from './held-torsions';
import type { HeldTorsion, HeldTorsions } from './held-torsions';
import { createHistory } from './history';
import type { History } from './history';
import type { Point } from './line-search';
import { createFrames } from './local-frames';
import type { LocalFrames } from './local-frames';
import { createPreconditioner } from './preconditioner';
import type { Preconditioner } from './preconditioner';

/** A point on the way; its `gradient` is in local form. */
export interface Place extends Point {
  readonly frames: LocalFrames;
  /** kcal/mol/Å, without what turns held torsions. */
  gradientRms: number;
}

export interface Workspace {
  readonly size: number;
  readonly skeleton: Skeleton | undefined;
  readonly history: History;
  readonly preconditioner: Preconditioner;
  /** Of the minimization that held torsions last; ask `heldTorsions` for it. */
  held: HeldTorsions | null;
  readonly places: readonly [Place, Place];
  /** Where the curvature was computed: it turns with the bonds like everything remembered. */
  readonly curvatureFrames: LocalFrames;
  /** The direction of a step, as it is and in local form, and a vector for use on the way from one form to the other. */
  readonly direction: Float64Array;
  readonly localDirection: Float64Array;
  readonly plain: Float64Array;
}

/** Pairs of steps and gradient changes remembered. */
const MEMORY = 12;

let spare: Workspace | null = null;

/** A workspace for `size` coordinates that remembers nothing, for as long as nobody else takes it. */
export function takeWorkspace(size: number, skeleton: Skeleton | undefined): Workspace {
  const workspace = spare;
  // Whoever works while another waits makes a new one.
  spare = null;
  if (workspace?.size !== size || workspace.skeleton !== skeleton) return create(size, skeleton);
  workspace.history.clear();
  workspace.preconditioner.clear();
  return workspace;
}

/** Gives a workspace back when the minimization is over. */
export function returnWorkspace(workspace: Workspace): void {
  spare = workspace;
}

/** What holds these torsions in place; null where there are none. The points of a scan hold the same ones at other angles. */
export function heldTorsions(
  workspace: Workspace,
  torsions: readonly HeldTorsion[] | undefined,
): HeldTorsions | null {
  if (!torsions || torsions.length === 0) return null;
  if (!workspace.held?.retarget(torsions)) workspace.held = holdTorsions(torsions, workspace.size);
  return workspace.held;
}

function create(size: number, skeleton: Skeleton | undefined): Workspace {
  const place = (): Place => ({
    x: new Float64Array(size),
    gradient: new Float64Array(size),
    energy: 0,
    frames: createFrames(skeleton),
    gradientRms: 0,
  });
  return {
    size,
    skeleton,
    history: createHistory(size, MEMORY),
    preconditioner: createPreconditioner(size),
    held: null,
    places: [place(), place()],
    curvatureFrames: createFrames(skeleton),
    direction: new Float64Array(size),
    localDirection: new Float64Array(size),
    plain: new Float64Array(size),
  };
}
