/** The energy over two torsions. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { checkTorsion } from '../molecule/rotatable';
import { writeMolfile } from '../molecule/write';
import { scanTorsionMap } from '../torsion/map';
import { withMolfile } from './geometry-text';
import { incompleteSearch } from './prepare';
import type { MapTask } from './request';
import type { MapFields, Outcome } from './result';

export async function mapBonds(
  forceField: ForceField,
  { torsions, step, seed }: MapTask,
  control: Control,
): Promise<Outcome<MapFields>> {
  const { molecule } = forceField;
  for (const torsion of torsions) checkTorsion(molecule, torsion);
  const map = await scanTorsionMap(forceField, { torsions, step, seed }, control);
  const reached = map.cells.flatMap(({ energy, coordinates }) =>
    coordinates ? [{ energy, coordinates }] : [],
  );
  const lowest = [...map.minima, ...reached].reduce((best, shape) =>
    shape.energy < best.energy ? shape : best,
  );
  return {
    fields: {
      ...map,
      cells: map.cells.map(({ angles, energy, relative, coordinates }) => ({
        angles,
        energy: coordinates && energy,
        relative: coordinates && relative,
        molfile: coordinates && writeMolfile(molecule, coordinates),
      })),
      minima: map.minima.map((minimum) => withMolfile(molecule, minimum)),
    },
    coordinates: lowest.coordinates,
    warnings: map.complete ? [] : [incompleteSearch],
  };
}
