import { describe, expect, it } from 'vitest';
import type { Drive } from './drives';
import { combination, countCombinations, spreadCombination } from './systematic';

function drive(...angles: number[]): Drive {
  return { atoms: [0, 1, 2, 3], moving: new Int32Array(), angles };
}

const drives = [drive(60, 180, 300), drive(0, 180), drive(0, 90, 180, 270)];

describe('combinations of torsions', () => {
  it('are all met once', () => {
    const count = countCombinations(drives);
    expect(count).toBe(24);
    const seen = new Set(Array.from({ length: count }, (_, n) => combination(drives, n).join()));
    expect(seen.size).toBe(24);
  });

  it('are sampled evenly where there are too many', () => {
    const many = Array.from({ length: 8 }, () => drive(60, 180, 300));
    const tally = new Map<string, number>();
    for (let n = 0; n < 900; n++) {
      const angles = spreadCombination(many, n);
      // Every pair of neighbors in the list has nine combinations, which come a hundred times each on average.
      for (let d = 0; d + 1 < many.length; d++) {
        const key = `${d}:${angles[d]},${angles[d + 1]}`;
        tally.set(key, (tally.get(key) ?? 0) + 1);
      }
    }
    expect(tally.size).toBe(7 * 9);
    for (const [key, times] of tally) expect(times, key).toBeGreaterThan(60);
  });
});
