import { beforeAll, describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import { readMolecule } from '../molecule/read';
import { defaultMapOptions, mapGrid, scanTorsionMap } from './map';
import type { MapOptions, MapResult } from './map';
import { lowestPath } from './path';

const torsions: MapOptions['torsions'] = [
  [0, 1, 2, 3],
  [1, 2, 3, 4],
];

function mapOf(smiles: string, options: Partial<MapOptions>): Promise<MapResult> {
  const forceField = createForceField(readMolecule({ smiles }));
  return scanTorsionMap(forceField, { ...defaultMapOptions, torsions, ...options }, unattended);
}

describe('scanTorsionMap of pentane', () => {
  let map: MapResult;
  const at = (first: number, second: number): number =>
    map.cells.find(({ angles }) => angles[0] === first && angles[1] === second)!.energy;

  beforeAll(async () => {
    map = await mapOf('CCCCC', { step: 60 });
  }, 60_000);

  it('covers the grid row by row', () => {
    expect(map.complete).toBe(true);
    expect(map.perAxis).toBe(6);
    expect(map.cells.map(({ angles }) => angles.join()).slice(0, 7)).toEqual([
      '-120,-120',
      '-120,-60',
      '-120,0',
      '-120,60',
      '-120,120',
      '-120,180',
      '-60,-120',
    ]);
    for (const { relative, coordinates } of map.cells) {
      expect(relative).toBeGreaterThanOrEqual(0);
      expect(coordinates).toHaveLength(51);
    }
  });

  it('has the symmetry of the molecule, exactly', () => {
    for (const { angles, energy } of map.cells) {
      const [first, second] = angles;
      const minus = (angle: number): number => (angle === 180 ? 180 : -angle || 0);
      expect(at(second, first)).toBe(energy);
      expect(at(minus(first), minus(second))).toBe(energy);
    }
  });

  it('finds the conformers of pentane', () => {
    // Anti-anti lowest, then anti-gauche twice two, then gauche-gauche of like sign (common practice, no source).
    const [lowest, ...others] = map.minima;
    expect(lowest.angles.map((angle) => Math.round(Math.abs(angle)))).toEqual([180, 180]);
    const antiGauche = others.filter(({ relative }) => relative < 1);
    expect(antiGauche).toHaveLength(4);
    const gaucheGauche = others.filter(
      ({ angles: [a, b] }) => a * b > 0 && Math.abs(a) < 75 && Math.abs(b) < 75,
    );
    expect(gaucheGauche).toHaveLength(2);
  });

  it('leads from one conformer to the next over the eclipsed barrier of one bond', () => {
    const [anti] = map.minima;
    const gauche = map.minima.find(({ cell }) => map.cells[cell].angles.join() === '60,180')!;
    const path = lowestPath(mapGrid(map), anti.cell, gauche.cell);
    expect(path.cells.map((cell) => map.cells[cell].angles)).toEqual([
      [180, 180],
      [120, 180],
      [60, 180],
    ]);
    // Near butane's barrier of 3.96 (MMFF94s by RDKit 2022.09.3).
    expect(Math.abs(path.passEnergy - anti.energy - 3.96)).toBeLessThan(0.2);
  });
});

describe('scanTorsionMap', () => {
  it('refuses two torsions about one bond and steps that are too fine', async () => {
    const same: MapOptions['torsions'] = [torsions[0], [3, 2, 1, 0]];
    await expect(mapOf('CCCCC', { torsions: same })).rejects.toMatchObject({ code: 'bad-torsion' });
    await expect(mapOf('CCCCC', { step: 1 })).rejects.toMatchObject({ code: 'bad-setting' });
  });
});
