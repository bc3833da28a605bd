import { describe, expect, it } from 'vitest';
import { readMolecule } from '../molecule/read';
import { compute } from '../../../../tests/support/compute';
import { coordinatesOf } from '../../domain/molfile-geometry';
import { orderAgain } from './order-again';

/** Geometries of the conformers, lowest first. */
async function conformersOf(smiles: string): Promise<Float64Array[]> {
  const { conformers } = await compute({ smiles }, 'conformers');
  return conformers.map(({ molfile }) => coordinatesOf(molfile));
}

describe('conformers in the order of another model', () => {
  it('are sorted by its energies, and those of one shape or mirror images merged', async () => {
    const molecule = readMolecule({ smiles: 'CCCC' });
    const [anti, gauche] = await conformersOf('CCCC');
    const mirrored = gauche.map((value) => -value);
    const ordered = orderAgain(molecule, [
      { energy: 5, coordinates: anti },
      { energy: 4, coordinates: gauche },
      { energy: 4.05, coordinates: mirrored },
    ]);
    expect(ordered.map(({ energy, degeneracy, from }) => ({ energy, degeneracy, from }))).toEqual([
      { energy: 4, degeneracy: 2, from: [1, 2] },
      { energy: 5, degeneracy: 1, from: [0] },
    ]);
    expect(ordered[0].rmsdToLowest).toBe(0);
    expect(ordered[1].rmsdToLowest).toBeGreaterThan(0.3);
  });

  it('of one shape stay apart where their energies are not one', async () => {
    const molecule = readMolecule({ smiles: 'CCCC' });
    const [anti] = await conformersOf('CCCC');
    const given = [4, 5].map((energy) => ({ energy, coordinates: anti }));
    expect(orderAgain(molecule, given)).toHaveLength(2);
  });
});
