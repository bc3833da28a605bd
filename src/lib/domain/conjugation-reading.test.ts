import { setImmediate } from 'node:timers/promises';
import { describe, expect, it } from 'vitest';
import { perform } from '../engine';
import { conjugationTaskSchema } from './compute';
import { conjugationAt } from './conjugation-reading';

describe('conjugationAt', () => {
  it('gives what the engine gives at its temperature, and more s-cis when it is hotter', async () => {
    const { bonds } = await perform(
      {
        molecule: { smiles: 'C=CC=C' },
        task: conjugationTaskSchema.parse({ kind: 'conjugation', temperature: 320 }),
      },
      { now: () => 0, breathe: () => setImmediate() },
    );
    const [bond] = bonds;
    const same = conjugationAt(bond.profile!, 320);
    expect(same.sCisFraction).toBeCloseTo(bond.sCisFraction!, 6);
    expect(same.meanOverlap).toBeCloseTo(bond.meanOverlap!, 6);
    const hotter = conjugationAt(bond.profile!, 600);
    expect(hotter.sCisFraction).toBeGreaterThan(2 * same.sCisFraction);
    expect(hotter.meanOverlap).toBeLessThan(same.meanOverlap);
  });
});
