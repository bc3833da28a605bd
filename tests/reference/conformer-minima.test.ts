/** The lowest energies our searches find against the lowest RDKit 2022.09.3 finds (data/conformer-minima.py). */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { compute } from '../support/compute';

const { molecules } = JSON.parse(
  readFileSync(new URL('./data/conformer-minima.json', import.meta.url), 'utf8'),
) as { molecules: { name: string; smiles: string; lowest: number }[] };

const recorded = (name: string) => molecules.find((molecule) => molecule.name === name)!;

describe('lowest conformers', () => {
  it('ibuprofen is as low as the lowest of 600 conformers from RDKit, 23.7896 kcal/mol', async () => {
    const { smiles, lowest } = recorded('ibuprofen');
    const { conformers } = await compute({ smiles }, 'conformers', {});
    expect(conformers[0].energy).toBeLessThan(lowest + 0.001);
  });

  it('2-phenylpyridine leaves the planar saddle RDKit stays on', async () => {
    const { smiles, lowest } = recorded('2-phenylpyridine');
    const { conformers } = await compute({ smiles }, 'conformers', {});
    expect(lowest).toBeCloseTo(42.872, 3);
    expect(conformers[0].energy).toBeLessThanOrEqual(42.395 + 0.0005);
  });
});
