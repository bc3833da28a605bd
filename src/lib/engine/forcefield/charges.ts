/** Partial charges by bond-charge increments (Halgren, J. Comput. Chem. 1996, 17, 520, equation 15). */
import { tableKey } from './parameter-table';
import type { Parameterization } from './parameterization';
import type { Parameters } from './parameters';
import { primaryCharges } from './primary-charges';

/**
 * Partial charges in electron charges: q_i = (1 − M_i u_i) q⁰_i + Σ_k u_k q⁰_k + Σ_k w_ki over the neighbors k, with q⁰
 * the primary charges, M the number of neighbors, u the formal-charge adjustment and w the bond-charge increments.
 */
export function partialCharges({
  structure,
  types,
  bondClasses,
  parameters,
}: Parameterization): Float64Array {
  const primary = primaryCharges(structure, types);
  const charges = Float64Array.from(primary);
  const adjustment = (atom: number): number =>
    parameters.partialIncrements.get(tableKey(types[atom]))![1];
  for (const [bond, { a, b }] of structure.molecule.bonds.entries()) {
    const shift =
      increment(parameters, bondClasses[bond], types[a], types[b]) +
      adjustment(a) * primary[a] -
      adjustment(b) * primary[b];
    charges[b] += shift;
    charges[a] -= shift;
  }
  return charges;
}

/** The charge that atom type j gains from type i; where the table has none, from the partial increments (equation 16). */
function increment(parameters: Parameters, bondClass: number, i: number, j: number): number {
  const forward = parameters.chargeIncrements.get(tableKey(bondClass, i, j));
  if (forward) return forward[0];
  const backward = parameters.chargeIncrements.get(tableKey(bondClass, j, i));
  if (backward) return -backward[0];
  const partial = (type: number): number => parameters.partialIncrements.get(tableKey(type))![0];
  return partial(j) - partial(i);
}
