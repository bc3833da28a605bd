/** Out-of-plane bending parameters (Halgren, J. Comput. Chem. 1996, 17, 553; MMFF94s: 1999, 20, 720). */
import { tableKey } from './parameter-table';
import type { Parameters } from './parameters';

/** Force constant in mdyn Å/rad² of a three-coordinate center with its three neighbors; undefined when none is known. */
export function outOfPlaneForce(
  parameters: Parameters,
  center: number,
  neighbors: readonly [number, number, number],
): number | undefined {
  // Steps 1-1-1-1 and 2-2-2-2, then ever more general neighbors; the last stands for any.
  const middle = parameters.equivalents.get(tableKey(center))![1];
  const outer = neighbors.map((type) => parameters.equivalents.get(tableKey(type))!);
  for (let level = 0; level < 5; level++) {
    const [i, k, l] = outer.map((levels) => levels[level]).sort((a, b) => a - b);
    const row = parameters.outOfPlanes.get(tableKey(middle, i, k, l));
    if (row) return row[0];
  }
  return undefined;
}
