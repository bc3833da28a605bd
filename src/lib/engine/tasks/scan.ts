/** The energy profile of one torsion. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { checkTorsion, torsionOfBond } from '../molecule/rotatable';
import { summarizeProfile } from '../torsion/profile';
import { scanTorsion } from '../torsion/scan';
import type { ScanResult } from '../torsion/scan-result';
import type { TorsionAtoms } from '../torsion/scan-symmetry';
import { stationaryVibrations } from '../torsion/stationary-vibrations';
import { withMolfile } from './geometry-text';
import { incompleteSearch } from './prepare';
import type { ScanTask } from './request';
import type { Outcome, ScanFields } from './result';

/** Share of the work after which vibrations begin, for progress. */
const SCAN_SHARE = 0.9;

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
  const options = { torsion, step, relaxed, seed };
  const scanned = await scanTorsion(forceField, options, control.part(0, SCAN_SHARE));
  const scan = await withVibrations(forceField, scanned, control.part(SCAN_SHARE, 1));
  const lowest = [...scan.stationary, ...scan.points].reduce((best, point) =>
    point.energy < best.energy ? point : best,
  );
  return {
    fields: {
      ...scan,
      points: scan.points.map((point) => withMolfile(molecule, point)),
      stationary: scan.stationary.map(
        ({ kind, angle, energy, relative, label, range, coordinates, converged, vibrations }) =>
          withMolfile(molecule, {
            kind,
            angle,
            energy,
            relative,
            label,
            range,
            coordinates,
            converged,
            ...(vibrations && { vibrations }),
          }),
      ),
      ...summarizeProfile(scan, temperature),
    },
    coordinates: lowest.coordinates,
    warnings: scan.complete ? [] : [incompleteSearch],
  };
}

/** The scan with the vibrations of its stationary points; a rigid one has no stationary points of the molecule's energy. */
async function withVibrations(
  forceField: ForceField,
  scan: ScanResult,
  control: Control,
): Promise<ScanResult> {
  if (!scan.relaxed) return scan;
  const { torsion, stationary } = scan;
  const analyses = await stationaryVibrations(forceField, torsion, stationary, control);
  return {
    ...scan,
    stationary: stationary.map((point, n) => ({ ...point, vibrations: analyses[n] })),
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
