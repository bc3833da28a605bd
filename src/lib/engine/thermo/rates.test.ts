import { describe, expect, it } from 'vitest';
import { KJ_PER_KCAL } from '../units';
import { eyringRate, halfLife, stabilityClass } from './rates';

describe('eyringRate and halfLife', () => {
  it('give about 1000 s for 93 kJ/mol at 300 K', () => {
    // Ōki's criterion for atropisomers: Top. Stereochem. 1983, 14, 1.
    const seconds = halfLife(eyringRate(93 / KJ_PER_KCAL, 300));
    expect(seconds).toBeGreaterThan(800);
    expect(seconds).toBeLessThan(2000);
  });

  it('give kB T / h without a barrier', () => {
    // kB/h = 2.083661912e10 1/(K s), CODATA 2018.
    expect(eyringRate(0, 298.15)).toBeCloseTo(2.083661912e10 * 298.15, -4);
  });

  it('slow down as the barrier rises and speed up with temperature', () => {
    expect(eyringRate(12, 298)).toBeLessThan(eyringRate(10, 298));
    expect(eyringRate(10, 350)).toBeGreaterThan(eyringRate(10, 298));
  });
});

describe('stabilityClass', () => {
  it('changes at 20 and 30 kcal/mol', () => {
    // LaPlante et al., J. Med. Chem. 2011, 54, 7005.
    expect([5, 19.99, 20, 25, 30, 30.01, 45].map(stabilityClass)).toEqual([1, 1, 2, 2, 2, 3, 3]);
  });
});
