import { describe, expect, it } from 'vitest';
import { profilePlot } from './profile-plot';

/** A barrier of 10 kcal/mol, which is 41.84 kJ/mol. */
const profile = {
  title: 'A turn',
  points: [0, 90, 180].map((angle) => ({ angle, relative: angle === 90 ? 10 : 0 })),
  stationary: [{ kind: 'maximum', angle: 90, relative: 10, label: 'top' }] as const,
};

/** Numbers along the energy axis: those that end at it. */
const ticks = (svg: string) =>
  [...svg.matchAll(/text-anchor="end">([\d.]+)</g)].map(([, text]) => Number(text));

describe('a plotted profile', () => {
  it('is drawn in kcal/mol, its axis reaching the highest point', () => {
    const svg = profilePlot(profile);
    expect(svg).toContain('Relative energy / kcal/mol');
    expect(Math.max(...ticks(svg))).toBeGreaterThanOrEqual(10);
    expect(Math.max(...ticks(svg))).toBeLessThan(20);
  });

  it('is drawn in kJ/mol where that is asked for', () => {
    const svg = profilePlot({ ...profile, unit: 'kJ/mol' });
    expect(svg).toContain('Relative energy / kJ/mol');
    expect(Math.max(...ticks(svg))).toBeGreaterThanOrEqual(41.84);
    expect(Math.max(...ticks(svg))).toBeLessThan(80);
  });
});
