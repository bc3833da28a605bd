import { describe, expect, it } from 'vitest';
import { createControl, unattended } from '../control';
import type { Control } from '../control';
import { createForceField } from '../forcefield/create';
import { torsion } from '../geometry';
import { minimize, rootMeanSquare } from '../minimizer/minimize';
import { softestMode } from '../minimizer/stationary';
import { createMolecule } from '../molecule/build';
import { readMolecule } from '../molecule/read';
import { hasRightStereo } from '../molecule/stereo';
import type { ConformerSearchOptions, ConformerSearchResult } from './conformers';
import { defaultConformerSearchOptions } from './conformers';
import { initialGeometry } from './initial-geometry';
import { searchConformers } from './search';

function search(
  smiles: string,
  options: Partial<ConformerSearchOptions> = {},
): Promise<ConformerSearchResult> {
  const forceField = createForceField(readMolecule({ smiles }));
  return searchConformers(forceField, { ...defaultConformerSearchOptions, ...options }, unattended);
}

/** Relative energies, kcal/mol, and degeneracies. */
function summary({ conformers }: ConformerSearchResult): [number, number][] {
  return conformers.map(({ relative, degeneracy }) => [Number(relative.toFixed(2)), degeneracy]);
}

describe('the conformers of small molecules', () => {
  // Energies: RDKit 2022.09.3, MMFF94s, minimized from the same shapes. Degeneracies: counted by hand.
  it('finds anti and gauche butane', async () => {
    const result = await search('CCCC');
    expect(summary(result)).toEqual([
      [0, 1],
      [0.78, 2],
    ]);
    expect(result.complete).toBe(true);
    const [anti, gauche] = result.conformers.map((c) => torsion(c.coordinates, 0, 1, 2, 3));
    expect(Math.abs(anti)).toBeCloseTo(180, 0);
    expect(Math.abs(gauche)).toBeGreaterThan(60);
    expect(Math.abs(gauche)).toBeLessThan(70);
  });

  it('finds the eleven minima of pentane as four conformers', async () => {
    // 3 × 3 staggered combinations, of which the two g+g- split into two minima each.
    const degeneracies = summary(await search('CCCCC')).map(([, degeneracy]) => degeneracy);
    expect(degeneracies).toEqual([1, 4, 2, 4]);
  });

  it('finds s-trans and the two gauche butadienes', async () => {
    const result = await search('C=CC=C');
    expect(result.conformers.map(({ degeneracy }) => degeneracy)).toEqual([1, 2]);
    expect(result.conformers[1].relative).toBeCloseTo(2.47, 1);
    const angle = Math.abs(torsion(result.conformers[1].coordinates, 0, 1, 2, 3));
    expect(angle).toBeGreaterThan(35);
    expect(angle).toBeLessThan(55);
  });

  it('finds both acroleins and both N-methylacetamides', async () => {
    for (const [smiles, atoms] of [
      ['C=CC=O', [0, 1, 2, 3]],
      ['CNC(C)=O', [0, 1, 2, 4]],
    ] as const) {
      const { conformers } = await search(smiles);
      const [i, j, k, l] = atoms;
      const angles = conformers.map(({ coordinates: x }) => Math.abs(torsion(x, i, j, k, l)));
      expect(conformers.map(({ degeneracy }) => degeneracy)).toEqual([1, 1]);
      expect(Math.max(...angles)).toBeGreaterThan(175);
      expect(Math.min(...angles)).toBeLessThan(5);
    }
  });

  it('finds chair and twist-boat cyclohexane', async () => {
    // Two chairs and six twist-boats on the way round the pseudorotation (textbook).
    expect(summary(await search('C1CCCCC1'))).toEqual([
      [0, 2],
      [5.93, 6],
    ]);
  });

  it('finds equatorial and axial methylcyclohexane and N-methylpiperidine', async () => {
    for (const smiles of ['CC1CCCCC1', 'CN1CCCCC1']) {
      const { conformers } = await search(smiles);
      // The torsion from the methyl group along the ring: anti when equatorial, gauche when axial.
      const angles = conformers.map(({ coordinates: x }) => Math.abs(torsion(x, 0, 1, 2, 3)));
      expect(angles[0]).toBeGreaterThan(165);
      expect(angles[1]).toBeLessThan(90);
      expect(conformers[1].degeneracy).toBe(conformers[0].degeneracy);
    }
  });

  it('tells conformers apart that differ in a hydroxyl hydrogen only', async () => {
    expect(summary(await search('CCO')).map(([, degeneracy]) => degeneracy)).toEqual([1, 2]);
  });

  it('answers one conformer where there is one', async () => {
    for (const smiles of ['C', '[Na+]', 'CC(C)C', 'c1ccccc1', 'C12C3C4C1C5C2C3C45', 'CC#CC']) {
      const result = await search(smiles);
      expect(summary(result), smiles).toEqual([[0, 1]]);
      expect(result.complete, smiles).toBe(true);
    }
  });

  it('counts both twists of biphenyl and hydrogen peroxide', async () => {
    expect(summary(await search('c1ccccc1-c1ccccc1'))).toEqual([[0, 2]]);
    expect(summary(await search('OO'))).toEqual([[0, 2]]);
  });
});

describe('what a search promises', () => {
  it('returns true minima with the configuration asked for', async () => {
    const smiles = 'C/C=C\\[C@H](O)C(=O)N[C@@H](C)CO';
    const molecule = readMolecule({ smiles });
    const forceField = createForceField(molecule);
    const { conformers } = await search(smiles, { limit: 12 });
    expect(conformers).toHaveLength(12);
    for (const { coordinates, energy, relative } of conformers) {
      const gradient = new Float64Array(coordinates.length);
      expect(forceField.energy(coordinates, gradient)).toBeCloseTo(energy, 6);
      expect(rootMeanSquare(gradient)).toBeLessThanOrEqual(0.00101);
      const mode = await softestMode(
        forceField.energy,
        coordinates,
        forceField.curvature,
        unattended,
      );
      expect(mode?.curvature).toBeGreaterThan(-2e-3);
      expect(hasRightStereo(molecule, coordinates)).toBe(true);
      expect(relative).toBeCloseTo(energy - conformers[0].energy, 9);
    }
  });

  it('weighs conformers by degeneracy and Boltzmann factor', async () => {
    const temperature = 350;
    const { conformers } = await search('CCCC', { temperature });
    // R in kcal/(mol K), CODATA 2018.
    const ratio = 2 * Math.exp(-conformers[1].relative / (1.987204e-3 * temperature));
    expect(conformers[1].population / conformers[0].population).toBeCloseTo(ratio, 5);
    expect(conformers[0].population + conformers[1].population).toBeCloseTo(1, 12);
  });

  it('keeps to window and limit and says what it left out', async () => {
    const narrow = await search('CCCCC', { window: 1 });
    expect(narrow.conformers).toHaveLength(2);
    expect(narrow.complete).toBe(true);
    const short = await search('CCCCC', { limit: 3 });
    expect(short.conformers).toHaveLength(3);
    expect(short).toMatchObject({ complete: false, ended: 'limit', settled: true });
    const exact = await search('CCCCC', { limit: 4 });
    expect(exact).toMatchObject({ complete: true, ended: 'stable' });
  });

  it('gives the same numbers for the same seed', async () => {
    const first = await search('OCC(O)C', { seed: 7 });
    await search('CCCO', { seed: 3 });
    expect(await search('OCC(O)C', { seed: 7 })).toEqual(first);
  });

  it('finds nothing above the minimum next to a geometry given', async () => {
    const molecule = readMolecule({ smiles: 'OCC(O)C(O)CO' });
    const coordinates = await initialGeometry(molecule, 99);
    const forceField = createForceField(createMolecule({ ...molecule, coordinates }));
    const { energy, curvature } = forceField;
    const x = coordinates.slice();
    const settings = { gradientRms: 0.001, maxEvaluations: 5000, curvature };
    const near = await minimize(energy, x, settings, unattended);
    const options = { ...defaultConformerSearchOptions, limit: 1 };
    // A budget that is over at once leaves time for the geometry given only.
    const control: Control = { ...unattended, part: () => control, expired: () => true };
    const { conformers } = await searchConformers(forceField, options, control);
    expect(conformers[0].energy).toBeCloseTo(near.energy, 4);
  });

  it('settles what the input leaves open the same way for every seed', async () => {
    const lowest = await Promise.all(
      [1, 2, 3].map(async (seed) => (await search('CC(O)C(N)CF', { seed })).conformers[0].energy),
    );
    expect(lowest[1]).toBeCloseTo(lowest[0], 4);
    expect(lowest[2]).toBeCloseTo(lowest[0], 4);
  });

  it('ends with what it has when its time is over', async () => {
    let time = 0;
    const control = createControl({ now: () => time++, breathe: async () => {}, budget: 400 });
    const forceField = createForceField(readMolecule({ smiles: 'CCCCCCO' }));
    const result = await searchConformers(forceField, defaultConformerSearchOptions, control);
    expect(result).toMatchObject({ complete: false, ended: 'budget', settled: false });
    expect(result.conformers.length).toBeGreaterThan(0);
  });

  it('stops when it is cancelled and reports rising progress before', async () => {
    const abort = new AbortController();
    const reports: number[] = [];
    const control = createControl({
      now: () => performance.now(),
      breathe: () => new Promise((resolve) => setImmediate(resolve)),
      signal: abort.signal,
      report: (fraction) => {
        reports.push(fraction);
        if (reports.length === 3) abort.abort(new Error('no longer wanted'));
      },
    });
    const forceField = createForceField(readMolecule({ smiles: 'CCCCCCCCCCCCCCCCCCCC' }));
    await expect(
      searchConformers(forceField, defaultConformerSearchOptions, control),
    ).rejects.toThrow('no longer wanted');
    expect(reports).toEqual([...reports].sort((a, b) => a - b));
  });
});
