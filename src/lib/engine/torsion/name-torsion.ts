/** The angle of a bond in a geometry, and what the trade calls it. */
import { torsion } from '../geometry';
import type { Molecule } from '../molecule/molecule';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { characterizeBond } from './bond-character';
import { klynePrelog } from './klyne-prelog';
import { labelGeometry } from './labels';
import type { TorsionAtoms } from './scan-symmetry';

/** A bond's torsion as it is named. */
export interface TorsionNamer {
  /** The four atoms that the name refers to: both double bonds of a diene, else the torsion asked for. */
  readonly atoms: TorsionAtoms;
  /** Angle in degrees, the trade's name for it and the Klyne-Prelog term, of a geometry (Å, 3N). */
  name(x: Float64Array): {
    readonly angle: number;
    readonly label: string;
    readonly range: string;
  };
}

/** Names the middle bond of a torsion in any geometry of a molecule, as minima of a scan are named. */
export function createTorsionNamer(molecule: Molecule, torsionAtoms: TorsionAtoms): TorsionNamer {
  const character = characterizeBond(molecule, torsionAtoms, symmetryClasses(molecule));
  const atoms = character.reference ?? torsionAtoms;
  return {
    atoms,
    name: (x) => {
      const angle = torsion(x, ...atoms);
      return {
        angle,
        label: labelGeometry(character, x, 'minimum'),
        range: klynePrelog(angle),
      };
    },
  };
}
