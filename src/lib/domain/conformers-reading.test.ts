import { describe, expect, it } from 'vitest';
import { compute } from '../../../tests/support/compute';
import { freeLeader, readConformers } from './conformers-reading';
import { whyNoFreeEnergy } from './free-energy-words';

describe('conformers read in the browser', () => {
  it('have the free energies and populations that the computation gives', async () => {
    for (const temperature of [250, 400]) {
      const { conformers } = await compute({ smiles: 'OCCO' }, 'conformers', { temperature });
      const { populations, free } = readConformers(conformers, temperature);
      conformers.forEach(({ population, freeEnergy, freePopulation }, n) => {
        expect(populations[n]).toBeCloseTo(population, 9);
        expect(free!.relative[n] === null).toBe(freeEnergy === null);
        expect(free!.relative[n] ?? 0).toBeCloseTo(freeEnergy ?? 0, 9);
        expect(free!.populations[n] ?? 0).toBeCloseTo(freePopulation ?? 0, 9);
      });
      const left = conformers.filter(({ freePopulation }) => freePopulation === null);
      expect(free!.leftOut).toBeCloseTo(
        left.reduce((sum, { population }) => sum + population, 0),
        9,
      );
      for (const { vibrations, relative } of left) {
        expect(relative).toBeGreaterThan(4);
        expect(whyNoFreeEnergy(vibrations)).toMatch(/more than 4 kcal\/mol/);
      }
    }
  });

  it('of old results are read by energy alone', () => {
    const old = [
      { relative: 0, degeneracy: 1, vibrations: null },
      { relative: 1, degeneracy: 2, vibrations: null },
    ];
    const reading = readConformers(old, 298.15);
    expect(reading.free).toBeNull();
    expect(freeLeader(reading)).toBeNull();
    expect(reading.populations[0]).toBeGreaterThan(reading.populations[1]);
  });
});
