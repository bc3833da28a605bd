/** The shapes of the parts that no bond turn reaches: ring puckers and nitrogen pyramids. */
import { torsion } from '../geometry';
import type { Molecule } from '../molecule/molecule';
import { turnBetween } from '../units';
import { atomShapes, flatRings } from './ideal-geometry';
import { pyramid } from './inversions';
import type { ShapeMoves } from './shape-moves';

/** Tells geometries by their ring torsions and pyramids. */
export interface CoreShapes {
  /** Takes a minimum in; remembers the lowest geometry of each core shape. */
  add(coordinates: Float64Array, energy: number): void;
  /** One geometry for each core shape, lowest energy first. */
  list(): readonly { readonly coordinates: Float64Array; readonly energy: number }[];
}

/** Ring torsions of one core shape differ by less, degrees. */
const SAME_TORSION = 25;

/** Starts a collection. */
export function collectCoreShapes(molecule: Molecule, moves: ShapeMoves): CoreShapes {
  const flat = flatRings(molecule, atomShapes(molecule));
  const chains = molecule.rings
    .filter((ring) => ring.length > 3 && !flat.includes(ring))
    .flatMap((ring) => ring.map((_, n) => [0, 1, 2, 3].map((d) => ring[(n + d) % ring.length])));
  const cores: {
    torsions: number[];
    pyramids: boolean[];
    coordinates: Float64Array;
    energy: number;
  }[] = [];
  return {
    add: (coordinates, energy) => {
      const torsions = chains.map(([i, j, k, l]) => torsion(coordinates, i, j, k, l));
      const pyramids = moves.inversions.map((inversion) => pyramid(coordinates, inversion) > 0);
      const known = cores.find(
        (core) =>
          core.pyramids.every((value, n) => value === pyramids[n]) &&
          core.torsions.every(
            (value, n) => Math.abs(turnBetween(value, torsions[n])) < SAME_TORSION,
          ),
      );
      if (!known) cores.push({ torsions, pyramids, coordinates: coordinates.slice(), energy });
      else if (energy < known.energy) {
        known.coordinates = coordinates.slice();
        known.energy = energy;
      }
    },
    list: () => [...cores].sort((a, b) => a.energy - b.energy),
  };
}
