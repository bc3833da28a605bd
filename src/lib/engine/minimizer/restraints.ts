/** Energies that keep a torsion or atoms near where they should be, each with its curvature for the minimizer. */
import type { CurvatureTerm, EnergyTerm } from '../energy-term';
import { addDiagonalBlock, addOuterProduct } from '../forcefield/terms/curvature-blocks';
import { torsionDerivative } from '../forcefield/terms/torsion-derivative';
import { toDegrees, turnBetween } from '../units';

/** An energy with the curvature that goes with it; a force field is one too. */
export interface SteeredEnergy {
  readonly energy: EnergyTerm;
  readonly curvature: CurvatureTerm;
}

/** Holds any torsion of an MMFF94 molecule within 0.1 degrees of its target, kcal/mol/degree². */
export const TORSION_RESTRAINT_FORCE = 100;

/**
 * E = force/2 · Δ², Δ the shortest turn in degrees from the target to the torsion i-j-k-l, force in kcal/mol/degree².
 * Smooth for planar torsions on both sides of 180; only at the opposite of the target has it a ridge.
 */
export function torsionRestraint(
  atoms: ArrayLike<number>,
  target: number,
  force: number = TORSION_RESTRAINT_FORCE,
): SteeredEnergy {
  const offsets = Int32Array.from(atoms, (atom) => 3 * atom);
  const derivative = new Float64Array(12);
  const stiffness = force * toDegrees(1) ** 2;
  return {
    energy: (x, gradient) => {
      const change = turnBetween(target, toDegrees(torsionDerivative(x, offsets, derivative)));
      const slope = toDegrees(force * change);
      for (let a = 0; a < 4; a++) {
        for (let p = 0; p < 3; p++) gradient[offsets[a] + p] += slope * derivative[3 * a + p];
      }
      return 0.5 * force * change * change;
    },
    curvature: (x, hessian) => {
      torsionDerivative(x, offsets, derivative);
      addOuterProduct(hessian, x.length, offsets, derivative, 4, stiffness);
    },
  };
}

/**
 * Ties atoms to places: E = force/2 · Σ (d - radius)² over the atoms whose distance d from their place in `reference`
 * (Å, 3N) is more than `radius` (Å), force in kcal/mol/Å².
 */
export function positionTethers(
  reference: Readonly<Float64Array>,
  atoms: ArrayLike<number>,
  radius: number,
  force: number,
): SteeredEnergy {
  const places = Float64Array.from(reference);
  const offsets = Int32Array.from(atoms, (atom) => 3 * atom);
  return {
    energy: (x, gradient) => {
      let energy = 0;
      for (let n = 0; n < offsets.length; n++) {
        const a = offsets[n];
        const dx = x[a] - places[a];
        const dy = x[a + 1] - places[a + 1];
        const dz = x[a + 2] - places[a + 2];
        const d = Math.sqrt(dx * dx + dy * dy + dz * dz);
        if (d <= radius) continue;
        energy += 0.5 * force * (d - radius) ** 2;
        const slope = (force * (d - radius)) / d;
        gradient[a] += slope * dx;
        gradient[a + 1] += slope * dy;
        gradient[a + 2] += slope * dz;
      }
      return energy;
    },
    curvature: (x, hessian) => {
      const size = x.length;
      for (let n = 0; n < offsets.length; n++) {
        const a = offsets[n];
        const dx = x[a] - places[a];
        const dy = x[a + 1] - places[a + 1];
        const dz = x[a + 2] - places[a + 2];
        const d = Math.sqrt(dx * dx + dy * dy + dz * dz);
        if (d <= radius) continue;
        const across = (force * (d - radius)) / d;
        addDiagonalBlock(hessian, size, a, dx / d, dy / d, dz / d, force - across, across);
      }
    },
  };
}

/** The sum of energies, each with its curvature. */
export function sumTerms(...terms: readonly SteeredEnergy[]): SteeredEnergy {
  return {
    energy: (x, gradient) => {
      let energy = 0;
      for (const term of terms) energy += term.energy(x, gradient);
      return energy;
    },
    curvature: (x, hessian) => {
      for (const term of terms) term.curvature(x, hessian);
    },
  };
}

/** The same energy with some atoms held exactly where they are: their gradient and their share of curvature vanish. */
export function holdAtoms(term: SteeredEnergy, atoms: ArrayLike<number>): SteeredEnergy {
  let gradientOfAll = new Float64Array(0);
  let hessianOfAll = new Float64Array(0);
  let held = new Uint8Array(0);
  const prepare = (size: number): void => {
    if (gradientOfAll.length === size) return;
    gradientOfAll = new Float64Array(size);
    held = new Uint8Array(size);
    for (let n = 0; n < atoms.length; n++) held.fill(1, 3 * atoms[n], 3 * atoms[n] + 3);
  };
  return {
    energy: (x, gradient) => {
      prepare(x.length);
      gradientOfAll.fill(0);
      const energy = term.energy(x, gradientOfAll);
      for (let a = 0; a < gradient.length; a++) if (held[a] === 0) gradient[a] += gradientOfAll[a];
      return energy;
    },
    curvature: (x, hessian) => {
      const size = x.length;
      prepare(size);
      if (hessianOfAll.length !== size * size) hessianOfAll = new Float64Array(size * size);
      hessianOfAll.fill(0);
      term.curvature(x, hessianOfAll);
      for (let a = 0; a < size; a++) {
        if (held[a] !== 0) continue;
        for (let b = 0; b < size; b++) {
          if (held[b] === 0) hessian[a * size + b] += hessianOfAll[a * size + b];
        }
      }
    },
  };
}
