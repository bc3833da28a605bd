/**
 * The surroundings of one bond as a molecule of their own. The torsional strain of a bond is read from the profile of
 * such a fragment: the profile of the whole molecule would be ruled by contacts between distant parts, which have
 * nothing to do with the bond, and would cost a search of the whole molecule at every angle.
 *
 * What is kept (common practice in fragmenting for torsion profiles; no source): the bond's two atoms, their
 * neighbors, and whatever those bear unless it is an unbranched saturated chain; rings of the bond's atoms and planar
 * rings whole; multiple bonds and bonds between heteroatoms uncut. Where a bond is cut, hydrogen takes the place of
 * the atom beyond it, so formal charges and the configuration of what is left stay as they were.
 */
import { createMolecule } from '../molecule/build';
import type { Bond, Molecule, Stereobond, Stereocenter } from '../molecule/molecule';

/** A fragment and where its atoms were in the molecule; a cap stands where its original was. */
export interface Fragment {
  readonly molecule: Molecule;
  readonly coordinates: Float64Array;
  /** Per atom of the fragment: its atom in the molecule; for a capping hydrogen the atom it replaces. */
  readonly origins: Int32Array;
  /** The bond's atoms and first neighbors among others: index in the fragment by atom of the molecule, -1 outside. */
  readonly indices: Int32Array;
}

/** Lengths of bonds to hydrogen, Å, rounded from the CRC Handbook's table of characteristic bond lengths. */
const HYDROGEN_BOND_LENGTHS: Readonly<Record<number, number>> = {
  6: 1.09,
  7: 1.01,
  8: 0.96,
  14: 1.48,
  15: 1.42,
  16: 1.34,
};
const OTHER_HYDROGEN_BOND_LENGTH = 1.4;

/** Cuts out the surroundings of the bond between atoms j and k, with the coordinates of the molecule. */
export function cutFragment(molecule: Molecule, x: Float64Array, j: number, k: number): Fragment {
  const kept = keptAtoms(molecule, j, k);
  const origins: number[] = [];
  const indices = new Int32Array(molecule.atomCount).fill(-1);
  for (let atom = 0; atom < molecule.atomCount; atom++) {
    if (!kept.has(atom)) continue;
    indices[atom] = origins.length;
    origins.push(atom);
  }
  const coordinates = origins.flatMap((atom) => [x[3 * atom], x[3 * atom + 1], x[3 * atom + 2]]);
  const keptCount = origins.length;
  const bonds: Bond[] = [];
  /** Caps by "kept atom, replaced atom". */
  const caps = new Map<string, number>();
  for (const { a, b, order } of molecule.bonds) {
    if (kept.has(a) && kept.has(b)) bonds.push({ a: indices[a], b: indices[b], order });
    if (kept.has(a) === kept.has(b)) continue;
    const [inside, outside] = kept.has(a) ? [a, b] : [b, a];
    caps.set(`${inside},${outside}`, origins.length);
    bonds.push({ a: indices[inside], b: origins.length, order: 1 });
    origins.push(outside);
    coordinates.push(...capPosition(molecule, x, inside, outside));
  }
  const place = (center: number, atom: number): number =>
    atom < 0 ? -1 : kept.has(atom) ? indices[atom] : (caps.get(`${center},${atom}`) ?? -1);
  return {
    molecule: createMolecule({
      name: `${molecule.name} around ${j}-${k}`,
      atomicNumbers: origins.map((atom, n) => (n < keptCount ? molecule.atomicNumbers[atom] : 1)),
      formalCharges: origins.map((atom, n) => (n < keptCount ? molecule.formalCharges[atom] : 0)),
      bonds,
      stereocenters: keptStereocenters(molecule, kept, indices, place),
      stereobonds: keptStereobonds(molecule, kept, indices, bonds, place),
      coordinates,
    }),
    coordinates: Float64Array.from(coordinates),
    origins: Int32Array.from(origins),
    indices,
  };
}

/** The atoms of the molecule that stay in the fragment of a bond. */
function keptAtoms(molecule: Molecule, j: number, k: number): ReadonlySet<number> {
  const { neighbors, rings, atomicNumbers } = molecule;
  const core = new Set([j, k]);
  for (const end of [j, k]) for (const { atom } of neighbors[end]) core.add(atom);
  const wholeRings = rings.filter(
    (ring) =>
      ring.includes(j) || ring.includes(k) || ring.every((atom) => isPlanar(molecule, atom)),
  );
  const kept = new Set<number>(core);
  const queue = [...core];
  const keep = (atom: number): void => {
    if (kept.has(atom)) return;
    kept.add(atom);
    queue.push(atom);
  };
  for (const ring of wholeRings) if (ring.includes(j) || ring.includes(k)) ring.forEach(keep);
  for (const atom of queue) {
    const bearsBranches = core.has(atom) && atom !== j && atom !== k && isBranch(molecule, atom);
    for (const neighbor of neighbors[atom]) {
      const uncut =
        atomicNumbers[neighbor.atom] === 1 ||
        molecule.bonds[neighbor.bond].order > 1 ||
        (isHetero(molecule, atom) && isHetero(molecule, neighbor.atom)) ||
        // Two caps for one atom would lie on each other.
        neighbors[neighbor.atom].filter((beyond) => kept.has(beyond.atom)).length > 1;
      if (uncut || bearsBranches) keep(neighbor.atom);
    }
    for (const ring of wholeRings) if (ring.includes(atom)) ring.forEach(keep);
  }
  return kept;
}

/** Whether what an atom bears matters to the bond beside it: all but the continuation of a saturated chain. */
function isBranch(molecule: Molecule, atom: number): boolean {
  const heavy = molecule.neighbors[atom].filter((n) => molecule.atomicNumbers[n.atom] !== 1);
  return molecule.atomicNumbers[atom] !== 6 || isUnsaturated(molecule, atom) || heavy.length > 2;
}

function isHetero(molecule: Molecule, atom: number): boolean {
  return molecule.atomicNumbers[atom] !== 6 && molecule.atomicNumbers[atom] !== 1;
}

function isUnsaturated(molecule: Molecule, atom: number): boolean {
  return molecule.neighbors[atom].some(({ bond }) => molecule.bonds[bond].order > 1);
}

/** Able to belong to a planar ring: unsaturated, or a heteroatom with a lone pair (pyrrole, furan, thiophene). */
function isPlanar(molecule: Molecule, atom: number): boolean {
  return (
    isUnsaturated(molecule, atom) ||
    ([7, 8, 16].includes(molecule.atomicNumbers[atom]) && molecule.neighbors[atom].length <= 3)
  );
}

/** Where the hydrogen goes that takes the place of an atom: along the cut bond, at the length of a bond to hydrogen. */
function capPosition(molecule: Molecule, x: Float64Array, inside: number, outside: number) {
  const length =
    HYDROGEN_BOND_LENGTHS[molecule.atomicNumbers[inside]] ?? OTHER_HYDROGEN_BOND_LENGTH;
  const bond = [0, 1, 2].map((n) => x[3 * outside + n] - x[3 * inside + n]);
  const scale = length / Math.hypot(...bond);
  return bond.map((component, n) => x[3 * inside + n] + scale * component);
}

/** The stereocentres that still have four different neighbors, or at least not two hydrogens. */
function keptStereocenters(
  molecule: Molecule,
  kept: ReadonlySet<number>,
  indices: Int32Array,
  place: (center: number, atom: number) => number,
): Stereocenter[] {
  return molecule.stereocenters
    .filter(
      ({ atom, neighbors }) =>
        kept.has(atom) && neighbors.filter((n) => endsInHydrogen(molecule, kept, n)).length < 2,
    )
    .map(({ atom, neighbors: [first, second, third, fourth], clockwise }) => ({
      atom: indices[atom],
      neighbors: [
        place(atom, first),
        place(atom, second),
        place(atom, third),
        place(atom, fourth),
      ] as const,
      clockwise,
    }));
}

/** The double bonds both of whose ends still bear something that sets their sides apart. */
function keptStereobonds(
  molecule: Molecule,
  kept: ReadonlySet<number>,
  indices: Int32Array,
  bonds: readonly Bond[],
  place: (center: number, atom: number) => number,
): Stereobond[] {
  const bothHydrogen = (end: number): boolean =>
    molecule.neighbors[end].filter(({ atom }) => endsInHydrogen(molecule, kept, atom)).length > 1;
  return molecule.stereobonds
    .filter(({ atoms: [, b, c] }) => kept.has(b) && kept.has(c))
    .filter(({ atoms: [, b, c] }) => !bothHydrogen(b) && !bothHydrogen(c))
    .map(({ atoms: [a, b, c, d], cis }) => ({
      bond: bonds.findIndex(
        (bond) =>
          (bond.a === indices[b] && bond.b === indices[c]) ||
          (bond.a === indices[c] && bond.b === indices[b]),
      ),
      atoms: [place(b, a), indices[b], indices[c], place(c, d)] as const,
      cis,
    }));
}

/** True where the fragment has a hydrogen in the place of this neighbor. */
function endsInHydrogen(molecule: Molecule, kept: ReadonlySet<number>, atom: number): boolean {
  return atom >= 0 && (!kept.has(atom) || molecule.atomicNumbers[atom] === 1);
}
