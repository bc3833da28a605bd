/** The configuration of a labelled geometry: what a turn about single bonds can never change. */
import { torsion } from '../geometry';
import type { Molecule } from '../molecule/molecule';

/** An atom whose neighbors cannot trade places: `sign` is +1 or -1 for them in the order of the molecule's table. */
export interface RigidCenter {
  readonly atom: number;
  readonly neighbors: readonly number[];
  readonly sign: number;
}

/** A double bond outside rings: a-b=c-d is cis or trans. */
export interface RigidBond {
  readonly atoms: readonly [number, number, number, number];
  readonly cis: boolean;
}

export interface Handedness {
  /** By atom; null for atoms that are flat or invert. */
  readonly centers: readonly (RigidCenter | null)[];
  readonly bonds: readonly RigidBond[];
}

const NITROGEN = 7;
/** Volume below which three bonds lie in one plane, Å³; about 1 for a tetrahedral carbon. */
const FLAT = 0.1;

/** Reads the configuration, labels and all, off a geometry (Å, 3N). */
export function readHandedness(molecule: Molecule, x: Float64Array): Handedness {
  const centers = molecule.neighbors.map((around, atom): RigidCenter | null => {
    const neighbors = around.map((neighbor) => neighbor.atom);
    if (!holdsItsShape(molecule, atom)) return null;
    const volume = signedVolume(x, atom, neighbors);
    return Math.abs(volume) < FLAT ? null : { atom, neighbors, sign: Math.sign(volume) };
  });
  const bonds = molecule.bonds.flatMap(({ a, b, order }, bond): RigidBond[] => {
    if (order !== 2 || molecule.ringBonds[bond] === 1) return [];
    return molecule.neighbors[a].flatMap((front): RigidBond[] =>
      molecule.neighbors[b].flatMap((rear): RigidBond[] => {
        if (front.atom === b || rear.atom === a) return [];
        const cis = Math.abs(torsion(x, front.atom, a, b, rear.atom)) < 90;
        return [{ atoms: [front.atom, a, b, rear.atom], cis }];
      }),
    );
  });
  return { centers, bonds };
}

/** Four neighbors always hold their shape; three do when the atom is pyramidal and slow to invert. */
function holdsItsShape(molecule: Molecule, atom: number): boolean {
  const around = molecule.neighbors[atom];
  if (around.length === 4) return true;
  const flat = around.some(({ bond }) => molecule.bonds[bond].order > 1);
  if (around.length !== 3) return false;
  const number = molecule.atomicNumbers[atom];
  // Sulfoxides have a double bond to oxygen and are pyramidal all the same.
  if (number > 10) return true;
  return number === NITROGEN && !flat && around.every(({ bond }) => molecule.ringBonds[bond] === 1);
}

/** Volume spanned by the bonds to the first three neighbors, Å³: its sign is the handedness. */
export function signedVolume(x: Float64Array, atom: number, neighbors: readonly number[]): number {
  const [u, v, w] = neighbors
    .slice(0, 3)
    .map((n) => [0, 1, 2].map((p) => x[3 * n + p] - x[3 * atom + p]));
  return (
    u[0] * (v[1] * w[2] - v[2] * w[1]) -
    u[1] * (v[0] * w[2] - v[2] * w[0]) +
    u[2] * (v[0] * w[1] - v[1] * w[0])
  );
}
