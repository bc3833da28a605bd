/** The energy profile of one torsion. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { checkTorsion, torsionOfBond } from '../molecule/rotatable';
import { summarizeProfile } from '../torsion/profile';
import { scanTorsion } from '../torsion/scan';
import type { TorsionAtoms } from '../torsion/scan-symmetry';
import { withMolfile } from './geometry-text';
import { incompleteSearch } from './prepare';
import type { ScanTask } from './request';
import type { Outcome, ScanFields } from './result';

/**
 * Scans the torsion given, or the reference torsion of the bond given; populations and rates are those at the
 * temperature.
 */
export async function scanBond(
  forceField: ForceField,
  task: ScanTask,
  control: Control,
): Promise<Outcome<ScanFields>> {
  const { step, relaxed, temperature, seed } = task;
  const { molecule } = forceField;
  const torsion = torsionOf(forceField, task);
  const scan = await scanTorsion(forceField, { torsion, step, relaxed, seed }, control);
  const lowest = [...scan.stationary, ...scan.points].reduce((best, point) =>
    point.energy < best.energy ? point : best,
  );
  return {
    fields: {
      ...scan,
      points: scan.points.map((point) => withMolfile(molecule, point)),
      stationary: scan.stationary.map(
        ({ kind, angle, energy, relative, label, range, coordinates, converged }) =>
          withMolfile(molecule, {
            kind,
            angle,
            energy,
            relative,
            label,
            range,
            coordinates,
            converged,
          }),
      ),
      ...summarizeProfile(scan, temperature),
    },
    coordinates: lowest.coordinates,
    warnings: scan.complete ? [] : [incompleteSearch],
  };
}

function torsionOf({ molecule }: ForceField, { torsion, bond }: ScanTask): TorsionAtoms {
  if (torsion) {
    checkTorsion(molecule, torsion);
    return torsion;
  }
  if (!bond) throw new Error('a scan task has neither torsion nor bond');
  return torsionOfBond(molecule, bond[0], bond[1]);
}
