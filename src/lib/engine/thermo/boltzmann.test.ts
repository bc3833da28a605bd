import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { boltzmannPopulations } from './boltzmann';

describe('boltzmannPopulations', () => {
  it('weighs states by degeneracy and energy', () => {
    // Closed form: with ΔE = RT ln 2 the upper state counts half; RT = 0.592484 kcal/mol at 298.15 K.
    const upper = 0.592484 * Math.LN2;
    const [low, high] = boltzmannPopulations([0, upper], [1, 2], 298.15);
    expect(low).toBeCloseTo(0.5, 6);
    expect(high).toBeCloseTo(0.5, 6);
  });

  it('gives an empty list for an empty list', () => {
    expect(boltzmannPopulations([], [], 298.15)).toEqual([]);
  });

  it('sums to 1 from any zero, at any temperature', () => {
    const energy = fc.double({ min: -5000, max: 5000, noNaN: true });
    fc.assert(
      fc.property(
        fc.array(energy, { minLength: 1, maxLength: 30 }),
        fc.double({ min: 1, max: 3000, noNaN: true }),
        (energies, temperature) => {
          const populations = boltzmannPopulations(
            energies,
            energies.map((_, i) => 1 + (i % 3)),
            temperature,
          );
          expect(populations.reduce((sum, p) => sum + p, 0)).toBeCloseTo(1, 10);
          expect(populations.every((p) => p >= 0)).toBe(true);
        },
      ),
    );
  });
});
