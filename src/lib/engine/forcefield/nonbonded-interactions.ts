/** The van der Waals and electrostatic pairs of a molecule with their parameters. */
import type { Interactions } from './interactions';
import type { Parameterization } from './parameterization';
import { combineVanDerWaals } from './van-der-waals-parameters';

type NonbondedInteractions = Pick<Interactions, 'vanDerWaals' | 'electrostatics'>;

/** Weight of the electrostatic interaction of atoms three bonds apart (part I, equation 9). */
const ONE_FOUR_SCALE = 0.75;

/** Parameterizes all pairs that are three or more bonds apart, or in different parts. */
export function nonbondedInteractions(
  { structure, types, parameters }: Parameterization,
  charges: Float64Array,
): NonbondedInteractions {
  const pairs: number[] = [];
  const radius: number[] = [];
  const depth: number[] = [];
  const chargedPairs: number[] = [];
  const chargeProduct: number[] = [];
  const { atomCount, neighbors } = structure.molecule;
  const combined = createPairTable((i, j) =>
    combineVanDerWaals(parameters.vanDerWaals.get(i)!, parameters.vanDerWaals.get(j)!),
  );
  for (let i = 0; i < atomCount; i++) {
    const bondsAway = nearBonds(neighbors, i);
    for (let j = i + 1; j < atomCount; j++) {
      if (bondsAway[j] < 3) continue;
      const pair = combined(types[i], types[j]);
      pairs.push(i, j);
      radius.push(pair.radius);
      depth.push(pair.depth);
      if (charges[i] === 0 || charges[j] === 0) continue;
      chargedPairs.push(i, j);
      chargeProduct.push((bondsAway[j] === 3 ? ONE_FOUR_SCALE : 1) * charges[i] * charges[j]);
    }
  }
  return {
    vanDerWaals: {
      atoms: Int32Array.from(pairs),
      radius: Float64Array.from(radius),
      depth: Float64Array.from(depth),
    },
    electrostatics: {
      atoms: Int32Array.from(chargedPairs),
      chargeProduct: Float64Array.from(chargeProduct),
    },
  };
}

/** Bonds between atom `from` and each other atom, as far as three; 4 stands for farther. */
function nearBonds(
  neighbors: readonly (readonly { readonly atom: number }[])[],
  from: number,
): Uint8Array {
  const away = new Uint8Array(neighbors.length).fill(4);
  away[from] = 0;
  let shell = [from];
  for (let bonds = 1; bonds <= 3; bonds++) {
    const next: number[] = [];
    for (const atom of shell) {
      for (const neighbor of neighbors[atom]) {
        if (away[neighbor.atom] < 4) continue;
        away[neighbor.atom] = bonds;
        next.push(neighbor.atom);
      }
    }
    shell = next;
  }
  return away;
}

/** Computes a value per pair of types once. */
function createPairTable<Value>(
  combine: (i: number, j: number) => Value,
): (i: number, j: number) => Value {
  const known = new Map<number, Value>();
  return (i, j) => {
    const key = i < j ? i * 128 + j : j * 128 + i;
    let value = known.get(key);
    if (value === undefined) {
      value = combine(i, j);
      known.set(key, value);
    }
    return value;
  };
}
