import { describe, expect, it } from 'vitest';
import { createPeriodicCurve, turnBetween } from '$lib/engine/light';
import { energyRings, halfArc, INNER, numbersAngle, OUTER, rimNames } from './dial-layout';

const minimum = (angle: number, label: string) =>
  ({ kind: 'minimum', angle, relative: 0, label, converged: true }) as const;

describe('the dial’s layout', () => {
  it('has rings at round energies of either unit, from the inner ring to the outermost', () => {
    for (const unit of ['kcal/mol', 'kJ/mol'] as const) {
      const { ticks, radiusOf } = energyRings(6.2, unit);
      const perKilocalorie = unit === 'kJ/mol' ? 4.184 : 1;
      expect(ticks[0]).toBe(0);
      expect(radiusOf(0)).toBe(INNER);
      expect(radiusOf(ticks.at(-1)! / perKilocalorie)).toBeCloseTo(OUTER, 9);
      expect(radiusOf(6.2)).toBeLessThanOrEqual(OUTER);
    }
  });

  it('keeps each name within its basin, and shortens it where that is narrow', () => {
    const basins = [
      { from: -100, to: -4, minimum: minimum(-38, 'gauche (skew)'), population: 0.01 },
      { from: -4, to: 24, minimum: minimum(10, 'staggered'), population: 0.5 },
      { from: 24, to: 28, minimum: minimum(26, 'staggered'), population: 0.49 },
    ];
    const names = rimNames(basins);
    expect(names.map(({ text }) => text)).toEqual(['gauche (skew) · 1.0 %', 'staggered']);
    names.forEach(({ angle, half }, n) => {
      expect(angle - half).toBeGreaterThanOrEqual(basins[n].from);
      expect(angle + half).toBeLessThanOrEqual(basins[n].to);
    });
    expect(halfArc('abcd', 10, 100)).toBeCloseTo(11.46, 2);
  });

  it('writes the energies where the curve is low, but on no minimum', () => {
    const angles = Array.from({ length: 24 }, (_, n) => -165 + 15 * n);
    const curve = createPeriodicCurve(
      angles,
      angles.map((angle) => 1 + Math.cos((angle * Math.PI) / 180)),
    );
    const basins = [{ from: 0, to: 360, minimum: minimum(180, 's-trans'), population: 1 }];
    const angle = numbersAngle({
      temperature: 298,
      curve,
      basins,
      forms: [],
      turn: null,
      ways: [],
      freeEnergies: null,
    });
    expect(Math.abs(turnBetween(angle, 180))).toBeGreaterThan(14);
    expect(curve.at(angle)).toBeLessThan(0.5);
  });
});
