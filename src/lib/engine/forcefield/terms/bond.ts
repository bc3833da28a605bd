/**
 * Bond stretching (Halgren, J. Comput. Chem. 1996, 17, 490, equation 2):
 * EB = 143.9325/2 · kb · Δr² · (1 + cs Δr + 7/12 cs² Δr²), Δr = r - r0, cs = -2 1/Å.
 */
import type { CurvatureTerm, EnergyTerm } from '../../energy-term';
import type { Interactions } from '../interactions';
import {
  COINCIDENT_GUARD,
  CUBIC_STRETCH as cs,
  KCAL_PER_MDYN_ANGSTROM,
  QUARTIC_STRETCH as quartic,
} from './constants';
import { addPairBlock } from './curvature-blocks';

/** The stretching energy of all bonds, kcal/mol. */
export function bondTerm({ atoms, length, force }: Interactions['bonds']): EnergyTerm {
  const count = force.length;
  return (x, gradient) => {
    let energy = 0;
    for (let n = 0; n < count; n++) {
      const i = 3 * atoms[2 * n];
      const j = 3 * atoms[2 * n + 1];
      const dx = x[i] - x[j];
      const dy = x[i + 1] - x[j + 1];
      const dz = x[i + 2] - x[j + 2];
      const r = Math.sqrt(dx * dx + dy * dy + dz * dz + COINCIDENT_GUARD);
      const change = r - length[n];
      const stiffness = KCAL_PER_MDYN_ANGSTROM * force[n] * change;
      energy += 0.5 * stiffness * change * (1 + change * (cs + quartic * change));
      const slope = (stiffness * (1 + change * (1.5 * cs + 2 * quartic * change))) / r;
      gradient[i] += slope * dx;
      gradient[i + 1] += slope * dy;
      gradient[i + 2] += slope * dz;
      gradient[j] -= slope * dx;
      gradient[j + 1] -= slope * dy;
      gradient[j + 2] -= slope * dz;
    }
    return energy;
  };
}

/** The positive part of the bonds' second derivatives: along the bond, and across it where the bond is stretched. */
export function bondCurvature({ atoms, length, force }: Interactions['bonds']): CurvatureTerm {
  const count = force.length;
  return (x, hessian) => {
    for (let n = 0; n < count; n++) {
      const i = 3 * atoms[2 * n];
      const j = 3 * atoms[2 * n + 1];
      const dx = x[i] - x[j];
      const dy = x[i + 1] - x[j + 1];
      const dz = x[i + 2] - x[j + 2];
      const r = Math.sqrt(dx * dx + dy * dy + dz * dz + COINCIDENT_GUARD);
      const change = r - length[n];
      const stiffness = KCAL_PER_MDYN_ANGSTROM * force[n];
      // With cs = -2 this second derivative is positive at every length.
      const along = stiffness * (1 + change * (3 * cs + 6 * quartic * change));
      const slope = stiffness * change * (1 + change * (1.5 * cs + 2 * quartic * change));
      const across = Math.max(0, slope / r);
      addPairBlock(hessian, x.length, i, j, dx / r, dy / r, dz / r, along - across, across);
    }
  };
}
