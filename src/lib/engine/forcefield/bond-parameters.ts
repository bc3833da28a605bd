/** Bond-stretching parameters, from the table or by the empirical rules (Halgren, J. Comput. Chem. 1996, 17, 616). */
import { periodicRow } from './element-rows';
import { tableKey } from './parameter-table';
import type { Parameters } from './parameters';

export interface BondParameters {
  /** Å */
  readonly length: number;
  /** mdyn/Å */
  readonly force: number;
}

/** Parameters of a bond between two atom types; undefined for elements that the rules do not cover. */
export function bondParameters(
  parameters: Parameters,
  bondClass: number,
  i: number,
  j: number,
): BondParameters | undefined {
  const row =
    parameters.bonds.get(tableKey(bondClass, i, j)) ??
    parameters.bonds.get(tableKey(bondClass, j, i));
  if (row) return { force: row[0], length: row[1] };
  const first = parameters.properties.get(i)?.atomicNumber;
  const second = parameters.properties.get(j)?.atomicNumber;
  if (first === undefined || second === undefined) return undefined;
  return estimateBond(parameters, first, second);
}

/** Bond length and force constant from the elements alone. */
export function estimateBond(
  parameters: Parameters,
  first: number,
  second: number,
): BondParameters | undefined {
  const length = estimateLength(parameters, first, second);
  if (length === undefined) return undefined;
  const force = estimateForce(parameters, first, second, length);
  return force === undefined ? undefined : { length, force };
}

/** Modified Schomaker-Stevenson rule: r° = r_i + r_j − c |χ_i − χ_j|^1.4 (equation 8, without its offset). */
function estimateLength(parameters: Parameters, first: number, second: number): number | undefined {
  const a = parameters.covalent.get(first);
  const b = parameters.covalent.get(second);
  if (!a || !b) return undefined;
  const c = first === 1 || second === 1 ? 0.05 : 0.085;
  const difference = Math.abs(a.electronegativity - b.electronegativity);
  return a.radius + b.radius - c * Math.pow(difference, 1.4);
}

/**
 * k = k_ref (r_ref/r°)⁶ from a reference bond of the same elements; without one, the rule of Herschbach and Laurie
 * (J. Chem. Phys. 1961, 35, 458), k = 10^(−(r° − a)/d).
 */
function estimateForce(
  parameters: Parameters,
  first: number,
  second: number,
  length: number,
): number | undefined {
  const reference = parameters.bondReferences.get(
    tableKey(Math.min(first, second), Math.max(first, second)),
  );
  if (reference) return reference[1] * Math.pow(reference[0] / length, 6);
  const rows = [periodicRow(first), periodicRow(second)].sort((a, b) => a - b);
  const constants = parameters.herschbachLaurie.get(tableKey(rows[0], rows[1]));
  return constants && Math.pow(10, -(length - constants[0]) / constants[1]);
}
