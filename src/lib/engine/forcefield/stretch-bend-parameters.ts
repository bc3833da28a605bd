/** Stretch-bend parameters (Halgren, J. Comput. Chem. 1996, 17, 553), by type or by the row of the elements. */
import { periodicRow } from './element-rows';
import { tableKey } from './parameter-table';
import type { Parameters } from './parameters';

/** The class of a stretch-bend read from the other end. */
const REVERSED: Readonly<Record<number, number>> = { 1: 2, 2: 1, 6: 7, 7: 6, 9: 10, 10: 9 };

/** Force constants [ijk, kji] in mdyn/rad; undefined for elements that the default table does not cover. */
export function stretchBendParameters(
  parameters: Parameters,
  stretchBendClass: number,
  i: number,
  j: number,
  k: number,
): readonly [number, number] | undefined {
  const forward = parameters.stretchBends.get(tableKey(stretchBendClass, i, j, k));
  if (forward) return [forward[0], forward[1]];
  const reversedClass = REVERSED[stretchBendClass] ?? stretchBendClass;
  const backward = parameters.stretchBends.get(tableKey(reversedClass, k, j, i));
  if (backward) return [backward[1], backward[0]];
  const rows = [i, j, k].map((type) => periodicRow(parameters.properties.get(type)!.atomicNumber));
  return defaultStretchBend(parameters, rows);
}

function defaultStretchBend(
  parameters: Parameters,
  [i, j, k]: readonly number[],
): readonly [number, number] | undefined {
  const forward = parameters.stretchBendDefaults.get(tableKey(i, j, k));
  if (forward) return [forward[0], forward[1]];
  const backward = parameters.stretchBendDefaults.get(tableKey(k, j, i));
  return backward && [backward[1], backward[0]];
}
