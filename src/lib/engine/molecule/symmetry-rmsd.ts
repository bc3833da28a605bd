/** Distance between two geometries of one molecule, whatever equal atoms are called. */
import { bestRmsd } from '../superpose';
import type { Molecule } from './molecule';

/**
 * Smallest root-mean-square distance, Å, over the heavy atoms (all atoms where fewer than three are heavy) between two
 * geometries (3N, Å): best superposition without reflection, over the renumberings given (see automorphisms()).
 */
export function symmetryRmsd(
  molecule: Molecule,
  a: Readonly<Float64Array>,
  b: Readonly<Float64Array>,
  permutations: readonly Int32Array[],
): number {
  const everyAtom = Array.from(molecule.atomicNumbers, (_, atom) => atom);
  const heavy = everyAtom.filter((atom) => molecule.atomicNumbers[atom] > 1);
  const from = heavy.length < 3 ? everyAtom : heavy;
  const to = new Int32Array(from.length);
  let least = Infinity;
  for (const permutation of permutations) {
    from.forEach((atom, n) => (to[n] = permutation[atom]));
    least = Math.min(least, bestRmsd(a, b, from, to));
  }
  return least;
}
