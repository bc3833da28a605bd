/** Boltzmann populations of a list of states. */
import { GAS_CONSTANT } from '../units';

/**
 * Populations p_i = g_i exp(-E_i/RT) / Σ g exp(-E/RT) of states with energies in kcal/mol (from any zero), their
 * degeneracies and a temperature in K. They sum to 1; an empty list gives an empty list.
 */
export function boltzmannPopulations(
  energies: ArrayLike<number>,
  degeneracies: ArrayLike<number>,
  temperature: number,
): number[] {
  const count = energies.length;
  let lowest = Infinity;
  for (let i = 0; i < count; i++) lowest = Math.min(lowest, energies[i]);
  const weights: number[] = [];
  let sum = 0;
  for (let i = 0; i < count; i++) {
    // Measured from the lowest state, no exponential can overflow and the sum is never zero.
    const weight =
      degeneracies[i] * Math.exp(-(energies[i] - lowest) / (GAS_CONSTANT * temperature));
    weights.push(weight);
    sum += weight;
  }
  return weights.map((weight) => weight / sum);
}
