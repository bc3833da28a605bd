/**
 * The rings of three to six atoms that no sum of smaller rings gives ("relevant cycles", Vismara, Electron. J. Comb.
 * 1997, 4, R9). A smallest set of smallest rings leaves out one face of a cage, and which one depends on the order
 * of the atoms; a force field must not.
 */
import type { Molecule } from '../molecule/molecule';

const LARGEST = 6;

/** All relevant cycles of up to six atoms, each as its atoms in order round the ring. */
export function findSmallRings(molecule: Molecule): readonly (readonly number[])[] {
  const candidates = molecule.rings.length === 0 ? [] : findCycles(molecule);
  const rings: number[][] = [];
  const space = createCycleSpace(molecule.bonds.length);
  for (let size = 3; size <= LARGEST; size++) {
    const independent = candidates
      .filter((ring) => ring.length === size)
      .filter((ring) => !space.spans(bondSet(molecule, ring)));
    rings.push(...independent);
    for (const ring of independent) space.add(bondSet(molecule, ring));
  }
  return rings;
}

/** Every cycle of up to six atoms once: it starts at its lowest atom, and its second atom is below its last. */
function findCycles(molecule: Molecule): number[][] {
  const cycles: number[][] = [];
  const extend = (path: number[]): void => {
    const first = path[0];
    for (const { atom, bond } of molecule.neighbors[path[path.length - 1]]) {
      if (!molecule.ringBonds[bond]) continue;
      if (atom === first && path.length > 2 && path[1] < path[path.length - 1])
        cycles.push([...path]);
      if (atom <= first || path.includes(atom) || path.length === LARGEST) continue;
      path.push(atom);
      extend(path);
      path.pop();
    }
  };
  for (let atom = 0; atom < molecule.atomCount; atom++) extend([atom]);
  return cycles;
}

function bondSet(molecule: Molecule, ring: readonly number[]): Set<number> {
  return new Set(
    ring.map((atom, n) => {
      const next = ring[(n + 1) % ring.length];
      return molecule.neighbors[atom].find((neighbor) => neighbor.atom === next)!.bond;
    }),
  );
}

/** Gaussian elimination over the two-element field; a row is a set of bonds. */
function createCycleSpace(bondCount: number) {
  const rows: (Set<number> | undefined)[] = new Array<undefined>(bondCount).fill(undefined);
  const reduce = (set: Set<number>): Set<number> => {
    const rest = new Set(set);
    for (let bond = 0; bond < bondCount && rest.size > 0; bond++) {
      const row = rows[bond];
      if (!row || !rest.has(bond)) continue;
      for (const other of row) if (!rest.delete(other)) rest.add(other);
    }
    return rest;
  };
  return {
    /** True when the set is a sum of sets added before. */
    spans: (set: Set<number>): boolean => reduce(set).size === 0,
    add: (set: Set<number>): void => {
      const rest = reduce(set);
      if (rest.size > 0) rows[Math.min(...rest)] = rest;
    },
  };
}
