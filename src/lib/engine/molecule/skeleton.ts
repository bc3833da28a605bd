/** The bonds of a molecule as trees: every atom but a root hangs on a parent, so that a geometry is a set of bond vectors. */
import type { Molecule } from './molecule';

export interface Skeleton {
  /** Offsets (3 × atom) of the atoms that hang on no other, one for each part that is not bonded to the rest. */
  readonly roots: Readonly<Int32Array>;
  /**
   * Four offsets a bond, parents first: the parent, the atom, and the ends of a neighboring bond that tells how both are
   * turned about the bond between them; of two atoms alone that bond itself.
   */
  readonly edges: Readonly<Int32Array>;
  /** One a bond: 1 where it is in no ring, so that what hangs on it may swing about the parent. */
  readonly swings: Readonly<Uint8Array>;
}

/** Lays the trees, breadth first. */
export function findSkeleton(molecule: Molecule): Skeleton {
  const { atomCount, neighbors, ringBonds } = molecule;
  const parents = new Int32Array(atomCount).fill(-1);
  const reached = new Uint8Array(atomCount);
  const roots: number[] = [];
  const edges: number[] = [];
  const swings: number[] = [];
  for (let root = 0; root < atomCount; root++) {
    if (reached[root] === 1) continue;
    reached[root] = 1;
    roots.push(3 * root);
    const queue = [root];
    for (const parent of queue) {
      for (const { atom, bond } of neighbors[parent]) {
        if (reached[atom] === 1) continue;
        reached[atom] = 1;
        parents[atom] = parent;
        queue.push(atom);
        const [from, to] = bondBeside(molecule, parents[parent], parent, atom);
        edges.push(3 * parent, 3 * atom, 3 * from, 3 * to);
        swings.push(ringBonds[bond] === 1 ? 0 : 1);
      }
    }
  }
  return {
    roots: Int32Array.from(roots),
    edges: Int32Array.from(edges),
    swings: Uint8Array.from(swings),
  };
}

/** Another bond of the parent, towards the root where there is one; else another of the atom. */
function bondBeside(
  { neighbors }: Molecule,
  grandparent: number,
  parent: number,
  atom: number,
): [number, number] {
  if (grandparent !== -1) return [parent, grandparent];
  const sibling = neighbors[parent].find((other) => other.atom !== atom);
  if (sibling) return [parent, sibling.atom];
  const child = neighbors[atom].find((other) => other.atom !== parent);
  return child ? [atom, child.atom] : [parent, atom];
}
