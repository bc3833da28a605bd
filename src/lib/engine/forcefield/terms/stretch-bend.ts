/**
 * Coupling of stretching and bending (Halgren, J. Comput. Chem. 1996, 17, 490, equation 5):
 * EBA = 2.51210 · (kbaIJK Δrij + kbaKJI Δrkj) · Δθ, Δθ in degrees, Δr in Å.
 */
import type { EnergyTerm } from '../../energy-term';
import type { Interactions } from '../interactions';
import {
  COINCIDENT_GUARD,
  COLLINEAR_GUARD,
  KCAL_PER_MDYN_ANGSTROM,
  RADIANS_PER_DEGREE,
} from './constants';

/** The coupling energy of all angles that have one, kcal/mol. */
export function stretchBendTerm(table: Interactions['stretchBends']): EnergyTerm {
  const { atoms, lengthIJ, lengthKJ, angle, forceIJK, forceKJI } = table;
  const count = angle.length;
  return (x, gradient) => {
    let energy = 0;
    for (let n = 0; n < count; n++) {
      const i = 3 * atoms[3 * n];
      const j = 3 * atoms[3 * n + 1];
      const k = 3 * atoms[3 * n + 2];
      const ux = x[i] - x[j];
      const uy = x[i + 1] - x[j + 1];
      const uz = x[i + 2] - x[j + 2];
      const vx = x[k] - x[j];
      const vy = x[k + 1] - x[j + 1];
      const vz = x[k + 2] - x[j + 2];
      const uu = ux * ux + uy * uy + uz * uz;
      const vv = vx * vx + vy * vy + vz * vz;
      const uv = ux * vx + uy * vy + uz * vz;
      const square = uu * vv + COLLINEAR_GUARD;
      const sine = Math.sqrt(Math.max(square - uv * uv, COLLINEAR_GUARD));
      const rij = Math.sqrt(uu + COINCIDENT_GUARD);
      const rkj = Math.sqrt(vv + COINCIDENT_GUARD);
      const bend = KCAL_PER_MDYN_ANGSTROM * (Math.atan2(sine, uv) - angle[n] * RADIANS_PER_DEGREE);
      const stretch = forceIJK[n] * (rij - lengthIJ[n]) + forceKJI[n] * (rkj - lengthKJ[n]);
      energy += stretch * bend;
      const slope = (KCAL_PER_MDYN_ANGSTROM * stretch) / sine;
      const onU = (slope * uv * vv) / square + (forceIJK[n] * bend) / rij;
      const onV = (slope * uv * uu) / square + (forceKJI[n] * bend) / rkj;
      const fx = onU * ux - slope * vx;
      const fy = onU * uy - slope * vy;
      const fz = onU * uz - slope * vz;
      const hx = onV * vx - slope * ux;
      const hy = onV * vy - slope * uy;
      const hz = onV * vz - slope * uz;
      gradient[i] += fx;
      gradient[i + 1] += fy;
      gradient[i + 2] += fz;
      gradient[k] += hx;
      gradient[k + 1] += hy;
      gradient[k + 2] += hz;
      gradient[j] -= fx + hx;
      gradient[j + 1] -= fy + hy;
      gradient[j + 2] -= fz + hz;
    }
    return energy;
  };
}
