/** Classes of atoms that look alike: the first step to a molecule's symmetry. */
import type { Molecule } from './molecule';

/**
 * One class number per atom by refinement until stable (Morgan, J. Chem. Doc. 1965, 5, 107) of element, isotope and
 * neighbors. With all hydrogens in place the skeleton fixes bond orders and charges up to resonance, so neither is
 * looked at: the two ortho atoms of a phenyl ring, the oxygens of a carboxylate or nitro group share a class whatever
 * structure was drawn. The numbers do not depend on the order of the atoms; symmetric atoms always share one.
 */
export function symmetryClasses(molecule: Molecule): Int32Array {
  const { atomCount, neighbors } = molecule;
  const atoms = Array.from({ length: atomCount }, (_, atom) => atom);
  let classes = ranks(
    atoms.map((atom) => [
      molecule.atomicNumbers[atom],
      molecule.massNumbers[atom],
      neighbors[atom].length,
    ]),
  );
  let count = new Set(classes).size;
  for (;;) {
    const refined = ranks(
      atoms.map((atom) => [
        classes[atom],
        ...neighbors[atom].map((neighbor) => classes[neighbor.atom]).sort((a, b) => b - a),
      ]),
    );
    const refinedCount = new Set(refined).size;
    if (refinedCount === count) return Int32Array.from(classes);
    classes = refined;
    count = refinedCount;
  }
}

/** Ranks of the keys in rising order, equal keys sharing one. */
function ranks(keys: readonly (readonly number[])[]): number[] {
  const order = keys.map((_, n) => n).sort((a, b) => compareKeys(keys[a], keys[b]));
  const result = new Array<number>(keys.length);
  order.forEach((atom, place) => {
    const same = place > 0 && compareKeys(keys[order[place - 1]], keys[atom]) === 0;
    result[atom] = same ? result[order[place - 1]] : place;
  });
  return result;
}

function compareKeys(left: readonly number[], right: readonly number[]): number {
  for (let n = 0; n < Math.max(left.length, right.length); n++) {
    const difference = (left[n] ?? -1) - (right[n] ?? -1);
    if (difference !== 0) return difference;
  }
  return 0;
}
