/** The units in which people read energies. All computation is in kcal/mol; only what is shown is converted. */

export const energyUnits = ['kcal/mol', 'kJ/mol'] as const;
export type EnergyUnit = (typeof energyUnits)[number];

/** The thermochemical calorie, exact by definition. */
const KILOJOULES_PER_KILOCALORIE = 4.184;

/** An energy in kcal/mol as a number of the given unit. */
export function inUnit(kilocalories: number, unit: EnergyUnit): number {
  return unit === 'kJ/mol' ? kilocalories * KILOJOULES_PER_KILOCALORIE : kilocalories;
}

/** The number alone, as tables write it; never minus nothing. */
export function energyNumber(kilocalories: number, unit: EnergyUnit, digits: number): string {
  const rounded = inUnit(kilocalories, unit).toFixed(digits);
  return Number(rounded) === 0 ? rounded.replace('-', '') : rounded;
}

/** An energy given in kcal/mol as people read it in a sentence: one digit after the point, and its unit. */
export function energyText(kilocalories: number, unit: EnergyUnit): string {
  return `${energyNumber(kilocalories, unit, 1)} ${unit}`;
}
