/** How fast a barrier is crossed, and what that means for separating the two sides. */
import { BOLTZMANN_OVER_PLANCK, GAS_CONSTANT } from '../units';

/**
 * First-order rate constant in 1/s for a barrier in kcal/mol at a temperature in K: k = (kB T / h) exp(-ΔG‡/RT) with
 * transmission coefficient 1 (Eyring, J. Chem. Phys. 1935, 3, 107). A model's energy barrier stands in for ΔG‡ here.
 */
export function eyringRate(barrier: number, temperature: number): number {
  return BOLTZMANN_OVER_PLANCK * temperature * Math.exp(-barrier / (GAS_CONSTANT * temperature));
}

/** Half-life in s of a first-order process with rate constant in 1/s. */
export function halfLife(rate: number): number {
  return Math.LN2 / rate;
}

/** Stability class of a stereogenic axis: 1 turns freely, 2 is a slow mixture, 3 is a stable atropisomer. */
export type StabilityClass = 1 | 2 | 3;

/**
 * Class of an axis by its barrier in kcal/mol: 1 below 20, 2 from 20 to 30, 3 above 30 (LaPlante et al., J. Med. Chem.
 * 2011, 54, 7005).
 */
export function stabilityClass(barrier: number): StabilityClass {
  if (barrier < 20) return 1;
  return barrier <= 30 ? 2 : 3;
}
