import { describe, expect, it } from 'vitest';
import { ROOM_TEMPERATURE } from '../units';
import { profileCurve, summarizeProfile } from './profile';
import type { Profile } from './profile';

const cosine = (angle: number) => Math.cos((angle * Math.PI) / 180);
/** Near butane's: gauche 0.9 above anti. */
const energy = (angle: number) => 0.67 * (1 + cosine(angle)) + 1.6 * (1 + cosine(3 * angle));

const butaneLike: Profile = {
  points: Array.from({ length: 24 }, (_, n) => -165 + 15 * n).map((angle) => ({
    angle,
    energy: energy(angle),
  })),
  stationary: (
    [
      ['maximum', -118],
      ['minimum', -62],
      ['maximum', 0],
      ['minimum', 62],
      ['maximum', 118],
      ['minimum', 180],
    ] as const
  ).map(([kind, angle]) => ({ kind, angle, energy: energy(angle) })),
  symmetry: { mirror: true },
};

describe('summarizeProfile', () => {
  const summary = summarizeProfile(butaneLike, ROOM_TEMPERATURE);

  it('shares the molecules out among the basins', () => {
    expect(summary.basins.map(({ minimum }) => minimum)).toEqual([1, 3, 5]);
    const [left, right, anti] = summary.basins.map(({ population }) => population);
    expect(left).toBeCloseTo(right, 6);
    expect(left + right + anti).toBeCloseTo(1, 10);
    // Wells of equal shape: exp(-ΔE/RT) = 0.22 for ΔE of 0.9, so anti holds near 1/(1 + 2 · 0.22).
    expect(Math.abs(anti - 0.69)).toBeLessThan(0.04);
  });

  it('counts each barrier from both its sides', () => {
    expect(summary.crossings).toHaveLength(6);
    const down = summary.crossings.find(({ from, to }) => from === 3 && to === 5)!;
    const up = summary.crossings.find(({ from, to }) => from === 5 && to === 3)!;
    expect(down.maximum).toBe(4);
    expect(up.barrier - down.barrier).toBeCloseTo(energy(62) - energy(180), 10);
    // Detailed balance: the two rates differ by the Boltzmann factor of the wells.
    const factor = Math.exp((energy(62) - energy(180)) / (0.0019872043 * ROOM_TEMPERATURE));
    expect(down.rate / up.rate).toBeCloseTo(factor, 4);
    expect(up.halfLife * up.rate).toBeCloseTo(Math.LN2, 10);
  });

  it('parts the forms at the second highest barrier', () => {
    expect(summary.interconversion?.barrier).toBeCloseTo(energy(118) - energy(180), 10);
    expect(summary.interconversion?.stability).toBe(1);
  });

  it('recovers the Fourier terms the profile was made of', () => {
    const { cosine: terms, residualRms } = summary.fourier!;
    [1.34, 0, 3.2, 0, 0, 0].forEach((value, n) => expect(terms[n]).toBeCloseTo(value, 8));
    expect(residualRms).toBeLessThan(1e-9);
  });

  it('draws the curve through grid and stationary points', () => {
    const curve = profileCurve(butaneLike);
    for (const { angle, energy: height } of butaneLike.stationary) {
      expect(curve.at(angle)).toBeCloseTo(height, 10);
    }
  });

  it('does not speak of basins when barriers are missing', () => {
    const partial = { ...butaneLike, stationary: butaneLike.stationary.slice(0, 5) };
    const { basins, crossings, interconversion } = summarizeProfile(partial, ROOM_TEMPERATURE);
    expect(basins).toEqual([]);
    expect(crossings).toEqual([]);
    expect(interconversion).toBeNull();
  });
});
