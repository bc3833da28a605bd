/**
 * Electrostatic energy, buffered Coulomb (Halgren, J. Comput. Chem. 1996, 17, 490, equation 13):
 * EQ = 332.0716 qi qj / (D (R + 0.05)ⁿ), n = 1 for a constant dielectric D, n = 2 for a distance-dependent one.
 */
import type { EnergyTerm } from '../../energy-term';
import type { Dielectric } from '../forcefield';
import type { Interactions } from '../interactions';
import { COINCIDENT_GUARD } from './constants';

/** Coulomb's constant in kcal Å/(mol e²), as the MMFF94 papers round it. */
export const COULOMB = 332.0716;
/** Electrostatic buffering, Å. */
export const BUFFER = 0.05;

/** The electrostatic energy of all pairs, kcal/mol: the plain version that the fast one is held against. */
export function electrostaticTerm(
  { atoms, chargeProduct }: Interactions['electrostatics'],
  { constant, distanceDependent }: Dielectric,
): EnergyTerm {
  const count = chargeProduct.length;
  const n = distanceDependent ? 2 : 1;
  const scale = COULOMB / constant;
  return (x, gradient) => {
    let energy = 0;
    for (let pair = 0; pair < count; pair++) {
      const i = 3 * atoms[2 * pair];
      const j = 3 * atoms[2 * pair + 1];
      const dx = x[i] - x[j];
      const dy = x[i + 1] - x[j + 1];
      const dz = x[i + 2] - x[j + 2];
      const R = Math.sqrt(dx * dx + dy * dy + dz * dz + COINCIDENT_GUARD);
      const inverse = 1 / (R + BUFFER);
      const part = scale * chargeProduct[pair] * (distanceDependent ? inverse * inverse : inverse);
      energy += part;
      const slope = (-n * part * inverse) / R;
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
