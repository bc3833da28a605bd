/** Relaxes a given geometry where it is: what bonds, angles and contacts want, without leaving its shape. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { distance } from '../geometry';
import { minimize } from '../minimizer/minimize';
import { REPORTED_GRADIENT_RMS, SEARCHING_GRADIENT_RMS } from '../minimizer/minimizer';
import { holdAtoms, positionTethers, sumTerms } from '../minimizer/restraints';

/** A geometry relaxed within its tethers. */
export interface RelaxedInPlace {
  /** Å, 3N. */
  readonly coordinates: Float64Array;
  /** kcal/mol, without the tethers' own energy. */
  readonly energy: number;
  /** Whether force field and tethers together came to rest. */
  readonly converged: boolean;
  /** The longest way a heavy atom went, Å, and which one. */
  readonly largestDisplacement: number;
  readonly farthestAtom: number;
}

/** Stiff enough that no contact pushes an atom far beyond its tether, kcal/mol/Å² (common practice, no source). */
const TETHER_FORCE = 100;
const MAX_EVALUATIONS = 20_000;

/**
 * Relaxes the hydrogens with the heavy atoms held, since their places in a measured structure are guesses; then all
 * atoms, the heavy ones free within `tether` (Å) of where they were and drawn back beyond it.
 */
export async function relaxInPlace(
  forceField: ForceField,
  given: Float64Array,
  tether: number,
  control: Control,
): Promise<RelaxedInPlace> {
  const x = given.slice();
  const heavy = heavyAtoms(forceField);
  const heldStill = holdAtoms(forceField, heavy);
  await minimize(
    heldStill.energy,
    x,
    {
      gradientRms: SEARCHING_GRADIENT_RMS,
      maxEvaluations: MAX_EVALUATIONS,
      curvature: heldStill.curvature,
    },
    control,
  );
  const tethered = sumTerms(forceField, positionTethers(given, heavy, tether, TETHER_FORCE));
  const { converged } = await minimize(
    tethered.energy,
    x,
    {
      gradientRms: REPORTED_GRADIENT_RMS,
      maxEvaluations: MAX_EVALUATIONS,
      curvature: tethered.curvature,
      skeleton: forceField.skeleton,
    },
    control,
  );
  const energy = forceField.energy(x, new Float64Array(x.length));
  return { coordinates: x, energy, converged, ...farthest(given, x, heavy) };
}

function heavyAtoms({ molecule }: ForceField): Int32Array {
  const atoms = Array.from(molecule.atomicNumbers, (_, atom) => atom);
  return Int32Array.from(atoms.filter((atom) => molecule.atomicNumbers[atom] !== 1));
}

function farthest(before: Float64Array, after: Float64Array, atoms: Int32Array) {
  let largestDisplacement = 0;
  let farthestAtom = atoms[0];
  // Both geometries side by side, so that one function measures all distances.
  const both = Float64Array.from([...before, ...after]);
  const count = before.length / 3;
  for (const atom of atoms) {
    const moved = distance(both, atom, count + atom);
    if (moved <= largestDisplacement) continue;
    largestDisplacement = moved;
    farthestAtom = atom;
  }
  return { largestDisplacement, farthestAtom };
}
