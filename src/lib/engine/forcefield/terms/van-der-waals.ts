/**
 * Van der Waals energy, the buffered 14-7 form (Halgren, J. Am. Chem. Soc. 1992, 114, 7827; J. Comput. Chem. 1996, 17,
 * 490, equation 8):
 * EvdW = ε (1.07 R* / (R + 0.07 R*))⁷ (1.12 R*⁷ / (R⁷ + 0.12 R*⁷) - 2).
 */
import type { EnergyTerm } from '../../energy-term';
import type { Interactions } from '../interactions';
import { COINCIDENT_GUARD } from './constants';

/** The van der Waals energy of all pairs, kcal/mol: the plain version that the fast one is held against. */
export function vanDerWaalsTerm(table: Interactions['vanDerWaals']): EnergyTerm {
  const { atoms, radius, depth } = table;
  const count = radius.length;
  return (x, gradient) => {
    let energy = 0;
    for (let n = 0; n < count; n++) {
      const i = 3 * atoms[2 * n];
      const j = 3 * atoms[2 * n + 1];
      const dx = x[i] - x[j];
      const dy = x[i + 1] - x[j + 1];
      const dz = x[i + 2] - x[j + 2];
      const R = Math.sqrt(dx * dx + dy * dy + dz * dz + COINCIDENT_GUARD);
      const rho = R / radius[n];
      const rho6 = rho ** 6;
      const buffered = 1 / (rho + 0.07);
      const repulsive = 1 / (rho6 * rho + 0.12);
      const envelope = depth[n] * (1.07 * buffered) ** 7;
      const bracket = 1.12 * repulsive - 2;
      energy += envelope * bracket;
      const slopeRho = -7 * envelope * (buffered * bracket + 1.12 * rho6 * repulsive * repulsive);
      const slope = slopeRho / (radius[n] * R);
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
