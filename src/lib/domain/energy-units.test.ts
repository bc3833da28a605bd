import { describe, expect, it } from 'vitest';
import { energyNumber, energyText, inUnit } from './energy-units';

describe('energies for people', () => {
  it.each([
    [-0.01, 'kcal/mol', '0.0 kcal/mol'],
    [2.466, 'kcal/mol', '2.5 kcal/mol'],
    [2.466, 'kJ/mol', '10.3 kJ/mol'],
  ] as const)('%d in %s is %s', (value, unit, text) => expect(energyText(value, unit)).toBe(text));

  // The thermochemical calorie is 4.184 J exactly (IUPAC Green Book, 3rd ed., section 7.2).
  it('converts by the thermochemical calorie', () => expect(inUnit(1, 'kJ/mol')).toBe(4.184));

  it('keeps a minus that means something', () =>
    expect(energyNumber(-0.56, 'kcal/mol', 1)).toBe('-0.6'));
});
