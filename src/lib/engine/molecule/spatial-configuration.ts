/** Reads the configuration from a 3-D geometry. */
import type { Molecule, Stereobond, Stereocenter } from './molecule';
import { isLinear } from './pi-systems';
import { handedness, isCis } from './stereo';

/** Handedness below which a center is too flat to have a configuration. */
const FLAT = 0.15;
/** Elements that keep a pyramid of three bonds and a lone pair: phosphorus, sulfur, arsenic, selenium, tellurium. */
const PYRAMIDAL = new Set([15, 16, 33, 34, 52]);

/** The configuration of every atom and double bond that could have one; whether it matters is decided elsewhere. */
export function spatialConfiguration(
  molecule: Molecule,
  coordinates: Float64Array,
): { centers: Stereocenter[]; doubleBonds: Stereobond[] } {
  const centers: Stereocenter[] = [];
  molecule.neighbors.forEach((around, atom) => {
    const pyramid = around.length === 3 && PYRAMIDAL.has(molecule.atomicNumbers[atom]);
    if (around.length !== 4 && !pyramid) return;
    const atoms = around.map((neighbor) => neighbor.atom);
    if (atoms.filter((other) => molecule.atomicNumbers[other] === 1).length > 3) return;
    const neighbors = (pyramid ? [...atoms, -1] : atoms) as [number, number, number, number];
    const sign = handedness(coordinates, atom, neighbors);
    if (Math.abs(sign) >= FLAT) centers.push({ atom, neighbors, clockwise: sign > 0 });
  });
  const doubleBonds: Stereobond[] = [];
  molecule.bonds.forEach(({ a, b, order }, bond) => {
    if (order !== 2 || isLinear(molecule, a) || isLinear(molecule, b)) return;
    const left = molecule.neighbors[a].find(({ atom }) => atom !== b);
    const right = molecule.neighbors[b].find(({ atom }) => atom !== a);
    if (!left || !right) return;
    const atoms = [left.atom, a, b, right.atom] as const;
    doubleBonds.push({ bond, atoms, cis: isCis(coordinates, atoms) });
  });
  return { centers, doubleBonds };
}
