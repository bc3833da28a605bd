/**
 * Textbook bond lengths and angles from the graph alone: rough aims for a first embedding, which the force field then
 * replaces by its own.
 */
import type { Molecule } from '../molecule/molecule';

/** What the bonds of an atom look like: two in a line, three in a plane, towards a tetrahedron's corners, or more. */
export type AtomShape = 'linear' | 'planar' | 'tetrahedral' | 'crowded';

/** Additive covalent radii of single bonds, Å (Pyykkö and Atsumi, Chem. Eur. J. 2009, 15, 186). */
const SINGLE_RADII: Readonly<Record<number, number>> = {
  1: 0.32,
  3: 1.33,
  5: 0.85,
  6: 0.75,
  7: 0.71,
  8: 0.63,
  9: 0.64,
  11: 1.55,
  12: 1.39,
  13: 1.26,
  14: 1.16,
  15: 1.11,
  16: 1.03,
  17: 0.99,
  34: 1.16,
  35: 1.14,
  53: 1.33,
};
/** The same for double bonds (Pyykkö and Atsumi, Chem. Eur. J. 2009, 15, 12770). */
const DOUBLE_RADII: Readonly<Record<number, number>> = {
  6: 0.67,
  7: 0.6,
  8: 0.57,
  15: 1.02,
  16: 0.94,
};
/** The same for triple bonds (Pyykkö, Riedel and Patzschke, Chem. Eur. J. 2005, 11, 3511). */
const TRIPLE_RADII: Readonly<Record<number, number>> = { 6: 0.6, 7: 0.54, 8: 0.53 };
/** A middling radius for elements the tables leave out. */
const OTHER_RADIUS = 1.25;

/** The expected length of a bond, Å; bonds within flat conjugated rings lie between single and double. */
export function idealLength(molecule: Molecule, bond: number, inFlatRing: boolean): number {
  const { a, b, order } = molecule.bonds[bond];
  const single = radius(molecule, a, 1) + radius(molecule, b, 1);
  if (order === 1 && !inFlatRing) return single;
  const multiple = radius(molecule, a, order) + radius(molecule, b, order);
  if (!inFlatRing) return multiple;
  return (single + radius(molecule, a, 2) + radius(molecule, b, 2)) / 2;
}

function radius(molecule: Molecule, atom: number, order: 1 | 2 | 3): number {
  const element = molecule.atomicNumbers[atom];
  const single = SINGLE_RADII[element] ?? OTHER_RADIUS;
  if (order === 1) return single;
  return (order === 2 ? DOUBLE_RADII : TRIPLE_RADII)[element] ?? single;
}

/** The shape of every atom, from its bond orders and, for lone pairs beside double bonds, its surroundings. */
export function atomShapes(molecule: Molecule): AtomShape[] {
  const doubleBonds = countBonds(molecule, 2);
  const tripleBonds = countBonds(molecule, 3);
  return Array.from({ length: molecule.atomCount }, (_, atom) => {
    const neighbors = molecule.neighbors[atom];
    if (neighbors.length > 4) return 'crowded';
    if (neighbors.length === 4) return 'tetrahedral';
    const element = molecule.atomicNumbers[atom];
    const light = element >= 5 && element <= 8;
    if (neighbors.length <= 2 && tripleBonds[atom] > 0) return 'linear';
    if (neighbors.length <= 2 && doubleBonds[atom] > 1 && light) return 'linear';
    // A sulfoxide or a sulfonium sulfur keeps its pyramid.
    if (doubleBonds[atom] > 0) return light || neighbors.length <= 2 ? 'planar' : 'tetrahedral';
    if (element === 5 || (element === 6 && neighbors.length === 3)) return 'planar';
    const conjugated = neighbors.some(
      ({ atom: other }) => doubleBonds[other] > 0 && molecule.atomicNumbers[other] <= 8,
    );
    return (element === 7 || element === 8) && conjugated ? 'planar' : 'tetrahedral';
  });
}

function countBonds(molecule: Molecule, order: number): Int32Array {
  const count = new Int32Array(molecule.atomCount);
  for (const bond of molecule.bonds) {
    if (bond.order !== order) continue;
    count[bond.a]++;
    count[bond.b]++;
  }
  return count;
}

/** The rings of five or six atoms whose every atom is planar or brings a lone pair: flat, aromatic or like it. */
export function flatRings(molecule: Molecule, shapes: readonly AtomShape[]): (readonly number[])[] {
  const bringsPair = (atom: number): boolean =>
    molecule.neighbors[atom].length === 2 && [8, 16, 34].includes(molecule.atomicNumbers[atom]);
  return molecule.rings.filter(
    (ring) =>
      (ring.length === 5 || ring.length === 6) &&
      ring.every((atom) => shapes[atom] === 'planar' || bringsPair(atom)) &&
      ring.filter((atom) => shapes[atom] === 'planar').length >= ring.length - 1,
  );
}

/** The expected bond angle at an atom of a shape, degrees, outside small rings. */
export function idealAngle(shape: AtomShape): number {
  if (shape === 'linear') return 180;
  return shape === 'planar' ? 120 : 109.5;
}

/** The expected angle inside a ring of a size, degrees. */
export function idealRingAngle(size: number, shape: AtomShape): number {
  if (size === 3) return 60;
  if (size === 4) return 89;
  if (size === 5) return shape === 'planar' ? 108 : 105;
  if (size === 6) return shape === 'planar' ? 120 : 111;
  return shape === 'planar' ? 122 : 113;
}
