import { describe, expect, it } from 'vitest';
import { energyColor, lightness } from './energy-scale';

describe('the energy scale', () => {
  it.each(['light', 'dark'] as const)('changes evenly in lightness on %s paper', (scheme) => {
    const values = Array.from({ length: 21 }, (_, n) => lightness(energyColor(n / 20, scheme)));
    const steps = values.slice(1).map((value, n) => value - values[n]);
    const direction = scheme === 'light' ? -1 : 1;
    for (const step of steps) expect(direction * step).toBeGreaterThan(0.005);
  });

  it('begins, turns and ends at its three colors, and stays there beyond them', () => {
    expect(energyColor(0, 'light')).toBe('#bfe0dc');
    expect(energyColor(0.5, 'light')).toBe('#d9a24f');
    expect(energyColor(1, 'light')).toBe('#b83a24');
    expect(energyColor(-3, 'light')).toBe(energyColor(0, 'light'));
    expect(energyColor(7, 'dark')).toBe(energyColor(1, 'dark'));
  });
});
