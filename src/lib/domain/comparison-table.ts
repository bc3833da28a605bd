/** A comparison as a comma-separated table; energies in the unit that its reader chose. */
import type { ComparisonRow, ComparisonView } from './comparison';
import { csvTable } from './csv';
import { inUnit } from './energy-units';

const DIGITS = 4;

/** One line for each profile, and the differences from the first one. */
export function comparisonTable(rows: readonly ComparisonRow[], view: ComparisonView): string {
  const unit = view.unit.replace('/', '_per_').toLowerCase();
  const energy = (value: number | null) =>
    value === null ? null : Number(inUnit(value, view.unit).toFixed(DIGITS));
  const less = (value: number | null, first: number | null) =>
    value === null || first === null ? null : value - first;
  const [first] = rows;
  return csvTable(
    [
      'molecule',
      'bond',
      'bond_kind',
      'eclipsed_at_0',
      'mirrored',
      'shift_degrees',
      'model',
      'relaxed',
      'preferred_form',
      'preferred_angle_degrees',
      `preferred_population_at_${view.temperature}_K`,
      `highest_barrier_${unit}`,
      `highest_barrier_minus_first_${unit}`,
      `energy_at_${view.angle}_degrees_${unit}`,
      `energy_at_${view.angle}_degrees_minus_first_${unit}`,
      `rms_difference_from_first_${unit}`,
    ],
    rows.map((row) => [
      row.profile.molecule,
      row.profile.bond,
      row.profile.bondKind,
      row.profile.zero,
      row.pick.mirrored,
      row.pick.shift,
      row.profile.model,
      row.profile.relaxed,
      row.preferred?.label,
      row.preferred && Number(row.preferred.angle.toFixed(1)),
      row.population === null ? null : Number(row.population.toFixed(DIGITS)),
      energy(row.barrier),
      energy(less(row.barrier, first.barrier)),
      energy(row.energy),
      energy(row.energy - first.energy),
      energy(row.distance),
    ]),
  );
}
