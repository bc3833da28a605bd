/** Torsion parameters from the table (Halgren, J. Comput. Chem. 1996, 17, 587; MMFF94s: 1999, 20, 720). */
import { tableKey } from './parameter-table';
import type { Parameters } from './parameters';

/** Levels of equivalence of the two outer atoms: full, half wild, half wild, wild. */
const STEPS: readonly (readonly [number, number])[] = [
  [0, 0],
  [2, 4],
  [4, 2],
  [4, 4],
];

/** [V1, V2, V3] in kcal/mol of types i-j-k-l, the classes tried in order; undefined when the table has none. */
export function findTorsion(
  parameters: Parameters,
  classes: readonly number[],
  types: readonly [number, number, number, number],
): readonly number[] | undefined {
  const [i, j, k, l] = inTableOrder(types).map((type) =>
    parameters.equivalents.get(tableKey(type))!,
  );
  for (const torsionClass of classes) {
    for (const [left, right] of STEPS) {
      const ends = [i[left], l[right]];
      if (j[1] === k[1]) ends.sort((a, b) => a - b);
      const row = parameters.torsions.get(tableKey(torsionClass, ends[0], j[1], k[1], ends[1]));
      if (row) return row;
    }
  }
  return undefined;
}

/** The smaller inner type first; between equal ones the smaller outer type first. */
function inTableOrder(
  types: readonly [number, number, number, number],
): readonly [number, number, number, number] {
  const [i, j, k, l] = types;
  return j > k || (j === k && i > l) ? [l, k, j, i] : types;
}
