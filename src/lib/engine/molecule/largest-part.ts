/** Strips salts and solvents: of a structure in several parts only the largest stays. */
import type { RawMolfile } from './connection-table';
import type { RawMolecule } from './raw';

/** The atoms of the part with most heavy atoms; of equals the heavier one, then the first. */
function largestPart({ atoms, bonds }: RawMolecule): number[] {
  const neighbors = atoms.map((): number[] => []);
  for (const { a, b } of bonds) {
    neighbors[a].push(b);
    neighbors[b].push(a);
  }
  const seen = new Uint8Array(atoms.length);
  let best: { part: number[]; heavy: number; weight: number } = { part: [], heavy: -1, weight: 0 };
  for (let start = 0; start < atoms.length; start++) {
    if (seen[start]) continue;
    seen[start] = 1;
    const part = [start];
    for (const atom of part) {
      for (const neighbor of neighbors[atom]) {
        if (seen[neighbor]) continue;
        seen[neighbor] = 1;
        part.push(neighbor);
      }
    }
    const numbers = part.map((atom) => atoms[atom].atomicNumber);
    const heavy = numbers.filter((number) => number > 1).length;
    const weight = numbers.reduce((sum, number) => sum + number, 0);
    if (heavy > best.heavy || (heavy === best.heavy && weight > best.weight)) {
      best = { part: part.sort((a, b) => a - b), heavy, weight };
    }
  }
  return best.part;
}

/** The largest part of a structure, its atoms in the order given; the structure itself when it has only one. */
export function keepLargestPart(raw: RawMolecule): RawMolecule {
  const part = largestPart(raw);
  if (part.length === raw.atoms.length) return raw;
  const places = placesOf(raw, part);
  const moved = (atom: number): number => (atom < 0 ? atom : places[atom]);
  const inPart = (atom: number): boolean => places[atom] >= 0;
  type Four = [number, number, number, number];
  return {
    ...raw,
    atoms: part.map((atom) => raw.atoms[atom]),
    bonds: raw.bonds
      .filter(({ a }) => inPart(a))
      .map((bond) => ({ ...bond, a: places[bond.a], b: places[bond.b] })),
    centers: raw.centers
      .filter(({ atom }) => inPart(atom))
      .map((center) => ({
        ...center,
        atom: places[center.atom],
        neighbors: center.neighbors.map(moved) as Four,
      })),
    doubleBonds: raw.doubleBonds
      .filter(({ atoms }) => inPart(atoms[1]))
      .map((double) => ({ ...double, atoms: double.atoms.map(moved) as Four })),
  };
}

/** The same of a molfile, with what belongs to its drawing or geometry. */
export function keepLargestPartOfFile(file: RawMolfile): RawMolfile {
  const { molecule } = file;
  const part = largestPart(molecule);
  if (part.length === molecule.atoms.length) return file;
  const places = placesOf(molecule, part);
  const bondPlaces = new Map<number, number>();
  molecule.bonds.forEach(({ a }, bond) => {
    if (places[a] >= 0) bondPlaces.set(bond, bondPlaces.size);
  });
  const present = (atom: number): boolean => places[atom] >= 0;
  return {
    ...file,
    molecule: keepLargestPart(molecule),
    coordinates: Float64Array.from(
      part.flatMap((atom) => [...file.coordinates.subarray(3 * atom, 3 * atom + 3)]),
    ),
    wedges: new Map(
      [...file.wedges]
        .filter(([bond]) => bondPlaces.has(bond))
        .map(([bond, wedge]) => [bondPlaces.get(bond)!, wedge]),
    ),
    openDoubleBonds: new Set(
      [...file.openDoubleBonds].flatMap((bond) => bondPlaces.get(bond) ?? []),
    ),
    parities: new Map(
      [...file.parities]
        .filter(([atom]) => present(atom))
        .map(([atom, parity]) => [places[atom], parity]),
    ),
    groupedCenters: file.groupedCenters.filter(present).map((atom) => places[atom]),
  };
}

/** The new number of every atom, -1 for those that go. */
function placesOf({ atoms }: RawMolecule, part: readonly number[]): Int32Array {
  const places = new Int32Array(atoms.length).fill(-1);
  part.forEach((atom, place) => {
    places[atom] = place;
  });
  return places;
}
