/** The columns of a bundle's tables that belong to free energies, at the temperature of the task. */
import { whyNoFreeEnergy } from '../domain/free-energy-words';
import { imaginaryModes, type VibrationalAnalysis } from '../engine/light';
import { energy } from './bundle-parts';

export const FREE_ENERGY_COLUMNS = [
  'free_energy_relative_kcal_per_mol',
  'lowest_frequency_per_cm',
  'imaginary_frequencies',
  'saddle_above_profile_kcal_per_mol',
  'no_free_energy_because',
];

/** Empty cells where nothing is known, as in results of versions before 0.3. */
export function freeEnergyCells(
  analysis: VibrationalAnalysis | null | undefined,
  relative: number | null | undefined,
): (number | string | null)[] {
  const modes = analysis?.modes;
  return [
    relative === null || relative === undefined ? null : Number(energy(relative)),
    modes?.frequencies[0] ?? null,
    modes ? imaginaryModes(modes) : null,
    analysis?.rise === undefined ? null : Number(energy(analysis.rise)),
    whyNoFreeEnergy(analysis),
  ];
}
