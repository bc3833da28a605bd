/**
 * The part of a molecule by which conformers are told apart: heavy atoms, and hydrogens on anything but carbon. Where
 * the hydrogens of carbon are follows from the rest, up to turns of methyl groups that change nothing.
 */
import type { Molecule } from '../molecule/molecule';

export interface VisibleGraph {
  /** The visible atoms, each (but the first) after a neighbor of its own. */
  readonly order: Int32Array;
  /** Per place in `order`: the place of that earlier neighbor, -1 for the first. */
  readonly parents: Int32Array;
  /** Per place in `order`: the places of all earlier neighbors. */
  readonly earlier: readonly (readonly number[])[];
  /** Per atom: its visible neighbors. */
  readonly adjacent: readonly (readonly number[])[];
  /** Per atom: its symmetry class. */
  readonly classes: ArrayLike<number>;
}

/** Lays the visible atoms out for matching, from the atom with the fewest equals on. */
export function visibleGraph(molecule: Molecule, classes: ArrayLike<number>): VisibleGraph {
  const visible = Array.from({ length: molecule.atomCount }, (_, atom) =>
    isVisible(molecule, atom),
  );
  const adjacent = molecule.neighbors.map((neighbors) =>
    neighbors.map(({ atom }) => atom).filter((atom) => visible[atom]),
  );
  const atoms = visible.flatMap((isSeen, atom) => (isSeen ? [atom] : []));
  const equals = (atom: number): number =>
    atoms.filter((other) => classes[other] === classes[atom]).length;
  const root = atoms.reduce((best, atom) => (equals(atom) < equals(best) ? atom : best));
  const order = [root];
  const places = new Map([[root, 0]]);
  const parents = [-1];
  const earlier: number[][] = [];
  for (let place = 0; place < order.length; place++) {
    for (const next of adjacent[order[place]]) {
      if (places.has(next)) continue;
      places.set(next, order.length);
      order.push(next);
      parents.push(place);
    }
    earlier.push(
      adjacent[order[place]].map((next) => places.get(next)!).filter((other) => other < place),
    );
  }
  return {
    order: Int32Array.from(order),
    parents: Int32Array.from(parents),
    earlier,
    adjacent,
    classes,
  };
}

function isVisible(molecule: Molecule, atom: number): boolean {
  if (molecule.atomicNumbers[atom] !== 1) return true;
  const neighbors = molecule.neighbors[atom];
  return neighbors.length !== 1 || molecule.atomicNumbers[neighbors[0].atom] !== 6;
}
