/** What every textbook teaches about turning single bonds (common practice, no source). */
import { describe, expect, it } from 'vitest';
import { readMolecule } from '$lib/engine/molecule/read';
import { turnBetween } from '$lib/engine/units';
import { compute } from '../support/compute';

type Torsion = [number, number, number, number];

async function barrier(smiles: string, torsion: Torsion): Promise<number> {
  const { stationary } = await compute({ smiles }, 'scan', { torsion });
  return Math.max(...stationary.map(({ relative }) => relative));
}

describe('ethane', () => {
  it('is lowest staggered and highest eclipsed', async () => {
    const { neighbors } = readMolecule({ smiles: 'CC' });
    const hydrogenOn = (carbon: number): number =>
      neighbors[carbon].find(({ atom }) => atom > 1)!.atom;
    const { stationary } = await compute({ smiles: 'CC' }, 'scan', {
      torsion: [hydrogenOn(0), 0, 1, hydrogenOn(1)],
    });
    const anglesOf = (kind: string): number[] =>
      stationary
        .filter((point) => point.kind === kind)
        .map(({ angle }) => Math.round(angle))
        .sort((a, b) => a - b);
    expect(anglesOf('minimum')).toEqual([-60, 60, 180]);
    expect(anglesOf('maximum')).toEqual([-120, 0, 120]);
    for (const point of stationary)
      expect(point.label).toContain(point.kind === 'minimum' ? 'staggered' : 'eclipsed');
  });
});

describe('open-chain 1,3-dienes', () => {
  it.each([
    ['buta-1,3-diene', 'C=CC=C', [0, 1, 2, 3]],
    ['isoprene', 'C=C(C)C=C', [0, 1, 3, 4]],
    ['(E)-penta-1,3-diene', 'C=C/C=C/C', [0, 1, 2, 3]],
    ['(E,E)-hexa-2,4-diene', 'C/C=C/C=C/C', [1, 2, 3, 4]],
  ] as [string, string, Torsion][])('%s prefers s-trans', async (_, smiles, torsion) => {
    const { stationary } = await compute({ smiles }, 'scan', { torsion });
    const lowest = stationary.find(({ relative }) => relative < 1e-6)!;
    expect(Math.abs(turnBetween(180, lowest.angle))).toBeLessThan(1);
    expect(lowest.label).toContain('s-trans');
  });
});

describe('conjugated single bonds', () => {
  it('cost more to turn than bonds between saturated carbons', async () => {
    const saturated = await Promise.all([
      barrier('CCCC', [0, 1, 2, 3]),
      barrier('CCCCC', [0, 1, 2, 3]),
    ]);
    const conjugated = await Promise.all([
      barrier('C=CC=C', [0, 1, 2, 3]),
      barrier('C=CC=O', [0, 1, 2, 3]),
      barrier('CNC(C)=O', [0, 1, 2, 3]),
    ]);
    expect(Math.min(...conjugated)).toBeGreaterThan(Math.max(...saturated));
  });
});
