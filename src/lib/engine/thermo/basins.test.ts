import { describe, expect, it } from 'vitest';
import { basinPopulations, profileAverage } from './basins';
import { createPeriodicCurve } from './periodic-curve';

const grid = Array.from({ length: 72 }, (_, i) => -175 + 5 * i);
const cosine = (fold: number, height: number) => (angle: number) =>
  (height / 2) * (1 + Math.cos((fold * angle * Math.PI) / 180));

describe('basinPopulations', () => {
  it('gives equal basins of a threefold profile a third each', () => {
    const curve = createPeriodicCurve(grid, grid.map(cosine(3, 2.9)));
    const populations = basinPopulations(curve, [0, 120, -120], 298.15);
    expect(populations).toHaveLength(3);
    for (const population of populations) expect(population).toBeCloseTo(1 / 3, 6);
  });

  it('lists the basins from the lowest border upwards', () => {
    const tilted = (angle: number) =>
      cosine(3, 3)(angle) + 0.9 * (1 + Math.cos((angle * Math.PI) / 180));
    const curve = createPeriodicCurve(grid, grid.map(tilted));
    // Basins: -120..0 (gauche), 0..120 (gauche), 120..-120 (anti, the lowest of the tilted profile).
    const populations = basinPopulations(curve, [120, 0, -120], 298.15);
    expect(populations[2]).toBeGreaterThan(populations[0]);
    expect(populations[0]).toBeCloseTo(populations[1], 6);
    expect(populations.reduce((sum, p) => sum + p)).toBeCloseTo(1, 10);
  });

  it('takes a profile with one barrier as one basin', () => {
    const curve = createPeriodicCurve(grid, grid.map(cosine(1, 4)));
    expect(basinPopulations(curve, [0], 298.15)).toEqual([1]);
  });
});

describe('profileAverage', () => {
  it('averages cos φ over a onefold profile to a ratio of Bessel functions', () => {
    // ∫ cos φ exp(-a cos φ) / ∫ exp(-a cos φ) = -I1(a)/I0(a) with a = 2/RT at 298.15 K; I0, I1 from their power series.
    const bessel = (order: number, x: number): number => {
      let term = (x / 2) ** order;
      let sum = 0;
      for (let k = 0; k < 60; k++) {
        sum += term;
        term *= (x / 2) ** 2 / ((k + 1) * (k + 1 + order));
      }
      return sum;
    };
    const a = 2 / 0.592484;
    const curve = createPeriodicCurve(grid, grid.map(cosine(1, 4)));
    const average = profileAverage(curve, (angle) => Math.cos((angle * Math.PI) / 180), 298.15);
    expect(average).toBeCloseTo(-bessel(1, a) / bessel(0, a), 3);
  });
});
