import { describe, expect, it } from 'vitest';
import { klynePrelog, torsionRange } from './klyne-prelog';

describe('Klyne-Prelog terms', () => {
  // Ranges: IUPAC, Pure Appl. Chem. 1996, 68, 2193, "torsion angle".
  it('divide the circle at 30, 90 and 150 degrees', () => {
    const angles = [0, 29, 31, 60, 89, 91, 120, 149, 151, 180];
    expect(angles.map(torsionRange)).toEqual([
      'sp',
      'sp',
      'sc',
      'sc',
      'sc',
      'ac',
      'ac',
      'ac',
      'ap',
      'ap',
    ]);
    expect(angles.map((angle) => torsionRange(-angle))).toEqual(angles.map(torsionRange));
    expect(torsionRange(300)).toBe('sc');
  });

  it('do not depend on the last digits of an angle on a border', () => {
    for (const border of [30, 90, 150]) {
      expect(torsionRange(border + 1e-9)).toBe(torsionRange(border - 1e-9));
    }
  });

  it('carry the sign of the turn', () => {
    expect(klynePrelog(60)).toBe('+sc');
    expect(klynePrelog(-65)).toBe('-sc');
    expect(klynePrelog(170)).toBe('+ap');
    expect(klynePrelog(180)).toBe('ap');
    expect(klynePrelog(0)).toBe('sp');
    expect(klynePrelog(-110)).toBe('-ac');
  });
});
