import { describe, expect, it } from 'vitest';
import { findLineMaximum } from './line-maximum';

async function search(f: (x: number) => number, left: number, top: number, right: number) {
  let evaluations = 0;
  const sample = await findLineMaximum(
    async (at) => {
      evaluations++;
      return f(at);
    },
    [left, top, right].map((at) => ({ at, value: f(at) })) as never,
    0.2,
  );
  return { ...sample, evaluations };
}

describe('findLineMaximum', () => {
  it('finds the top of a smooth barrier in a few steps', async () => {
    for (const summit of [93, 97.5, 102.3, 104.9, 111]) {
      const barrier = (x: number) => 3 * (1 + Math.cos(((x - summit) * Math.PI) / 180));
      const found = await search(barrier, 90, 105, 120);
      expect(Math.abs(found.at - summit)).toBeLessThan(0.2);
      expect(found.evaluations).toBeLessThan(10);
    }
  });

  it('finds a kink, where two ways of going over cross', async () => {
    const kink = (x: number) => Math.min(0.3 * (x + 20), 4 - 0.5 * x);
    const found = await search(kink, -15, 0, 15);
    expect(Math.abs(found.at - -2.5)).toBeLessThan(0.2);
  });

  it('stays at a top that is there already', async () => {
    const found = await search((x) => -x * x, -15, 0, 15);
    expect(found.at).toBe(0);
  });
});
