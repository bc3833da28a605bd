/** Conformers whose energies, and perhaps geometries, come from another model: put in order and freed of duplicates. */
import type { Molecule } from '../molecule/molecule';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { degeneracies } from './degeneracy';
import { isSameShape, lowestRmsd } from './sameness';
import { visibleGraph } from './visible-graph';

export interface Reordered {
  /** kcal/mol, on the other model's own scale. */
  readonly energy: number;
  /** Å, 3N */
  readonly coordinates: Float64Array;
  readonly degeneracy: number;
  /** RMSD to the lowest, Å. */
  readonly rmsdToLowest: number;
  /** Positions in the list given of those that fell together here, the lowest first. */
  readonly from: readonly number[];
}

/** Minima of one shape whose energies differ by less are one conformer, kcal/mol; the other model's optimizer leaves that. */
const SAME_ENERGY = 0.1;

/** Lowest first; those that are one shape of one energy, or mirror images, are merged. */
export function orderAgain(
  molecule: Molecule,
  given: readonly { readonly energy: number; readonly coordinates: Float64Array }[],
): Reordered[] {
  const graph = visibleGraph(molecule, symmetryClasses(molecule));
  const kept: { energy: number; coordinates: Float64Array; from: number[] }[] = [];
  const byEnergy = [...given.entries()].toSorted(([, a], [, b]) => a.energy - b.energy);
  for (const [position, { energy, coordinates }] of byEnergy) {
    const same = kept.find(
      (other) =>
        energy - other.energy < SAME_ENERGY && isSameShape(graph, coordinates, other.coordinates),
    );
    if (same) same.from.push(position);
    else kept.push({ energy, coordinates, from: [position] });
  }
  const weights = degeneracies(
    molecule,
    graph,
    kept.map(({ coordinates }) => coordinates),
  );
  return kept.map((each, n) => ({
    ...each,
    degeneracy: weights[n],
    rmsdToLowest: lowestRmsd(graph, each.coordinates, kept[0].coordinates),
  }));
}
