/** From the top of a relaxed profile to the saddle of the free energy surface near it. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { dot } from '../minimizer/history';
import { rootMeanSquare } from '../minimizer/minimize';
import { REPORTED_GRADIENT_RMS } from '../minimizer/minimizer';
import { eigenvaluesOf, eigenvectorsOf, solveWith } from '../thermo/tridiagonal-form';
import { farthestMove, overRootMass, vibrationalForm } from '../thermo/vibrations';
import type { VibrationalForm } from '../thermo/vibrations';
import type { TorsionAtoms } from './scan-symmetry';
import { torsionGradient } from './torsion-gradient';

export interface RefinedSaddle {
  /** 3N, Å */
  readonly coordinates: Float64Array;
  /** kcal/mol */
  readonly energy: number;
  /** The curvature there. */
  readonly form: VibrationalForm;
}

/** Steps before giving up: one or two from a smooth top; more where the profile changes branches before its saddle. */
const MOST_STEPS = 14;
/** A search that has climbed so far above the profile has lost its way, kcal/mol. */
const MOST_RISE = 12;
/** The longest way of an atom in one step, Å: farther off, the curvature means little. */
const TRUST_RADIUS = 0.2;
/** The softest modes among which the torsion's is looked for, besides those of negative curvature. */
const SOFT_MODES = 8;
/** Root of the mass that moves in a soft mode, √(g/mol). */
const SOFT_MASS = 4;

/**
 * Follows the torsion's mode up and all others down (Cerjan and Miller, J. Chem. Phys. 1981, 75, 2800) from the top of a profile (Å,
 * 3N) to a stationary point; near a saddle this is Newton's method. Its modes must be looked at by the caller. Null when none
 * is reached within a few short steps.
 */
export async function refineSaddle(
  forceField: ForceField,
  torsion: TorsionAtoms,
  start: Readonly<Float64Array>,
  control: Control,
): Promise<RefinedSaddle | null> {
  const coordinates = Float64Array.from(start);
  const gradient = new Float64Array(start.length);
  let followed: Float64Array | null = null;
  let highest = Infinity;
  for (let steps = 0; steps <= MOST_STEPS; steps++) {
    if (control.expired()) return null;
    gradient.fill(0);
    const energy = forceField.energy(coordinates, gradient);
    if (steps === 0) highest = energy + MOST_RISE;
    if (!(energy <= highest)) return null;
    const form = await vibrationalForm(forceField, coordinates, control);
    if (rootMeanSquare(gradient) <= REPORTED_GRADIENT_RMS) return { coordinates, energy, form };
    const along = overRootMass(torsionGradient(torsion, coordinates), form.masses);
    const next = uphillStep(form, gradient, along, followed);
    followed = next.followed;
    const scale = Math.min(1, TRUST_RADIUS / farthestMove(next.step));
    for (let a = 0; a < coordinates.length; a++) coordinates[a] += scale * next.step[a];
  }
  return null;
}

/**
 * Newton's step, except that along the softest modes the sign is that of up for the mode to be followed and of down for all
 * others, and that no soft mode goes farther than a step may. `along` is the torsion's derivative, mass-weighted.
 */
function uphillStep(
  { form, masses }: VibrationalForm,
  gradient: Readonly<Float64Array>,
  along: Readonly<Float64Array>,
  followed: Readonly<Float64Array> | null,
): { step: Float64Array; followed: Float64Array } {
  const values = eigenvaluesOf(form);
  const negatives = values.filter((value) => value < 0).length;
  const low = values.subarray(0, Math.max(SOFT_MODES, negatives));
  const vectors = eigenvectorsOf(form, low);
  const chosen = negatives === 1 ? 0 : modeToFollow(vectors, low, along, followed);
  const pull = overRootMass(gradient, masses);
  const step = solveWith(form, pull).map((value) => -value);
  const most = TRUST_RADIUS * SOFT_MASS;
  vectors.forEach((vector, n) => {
    const force = dot(vector, pull);
    const wanted = (n === chosen ? force : -force) / Math.abs(low[n]);
    const change = Math.max(-most, Math.min(most, wanted)) - dot(vector, step);
    for (let a = 0; a < step.length; a++) step[a] += change * vector[a];
  });
  return { step: overRootMass(step, masses), followed: vectors[chosen] };
}

/** The mode most like the one followed so far; at first the one in which the torsion gives way most easily. */
function modeToFollow(
  vectors: readonly Float64Array[],
  values: Readonly<Float64Array>,
  along: Readonly<Float64Array>,
  followed: Readonly<Float64Array> | null,
): number {
  const fitness = vectors.map((vector, n) =>
    followed ? Math.abs(dot(vector, followed)) : dot(vector, along) ** 2 / Math.abs(values[n]),
  );
  return fitness.indexOf(Math.max(...fitness));
}
