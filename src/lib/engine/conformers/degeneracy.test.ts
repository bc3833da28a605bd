import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import { readMolecule } from '../molecule/read';
import { defaultConformerSearchOptions } from './conformers';
import { searchConformers } from './search';

async function degeneracies(smiles: string): Promise<number[]> {
  const forceField = createForceField(readMolecule({ smiles }));
  const result = await searchConformers(forceField, defaultConformerSearchOptions, unattended);
  return result.conformers.map(({ degeneracy }) => degeneracy);
}

describe('degeneracies', () => {
  // Counted by hand as sets of torsions: what is left after turns of symmetric tops is all there is.
  it('of chains add up to the number of minima', async () => {
    expect(await degeneracies('OCCC')).toHaveLength(5);
    expect((await degeneracies('OCCC')).reduce((sum, g) => sum + g, 0)).toBe(9);
    expect((await degeneracies('CCCCC')).reduce((sum, g) => sum + g, 0)).toBe(11);
  });

  it('do not count the turns of symmetric tops', async () => {
    expect(await degeneracies('OC(C)(C)C')).toEqual([1]);
    expect(await degeneracies('Oc1ccccc1')).toEqual([1]);
    expect(await degeneracies('CN')).toEqual([1]);
    expect(await degeneracies('CN(C)C')).toEqual([1]);
    expect(await degeneracies('FC(F)(F)CO')).toEqual([2, 1]);
    expect(await degeneracies('NC(=[NH2+])NCC')).toEqual([1, 2]);
  });

  it('are one throughout for a chiral molecule without alike groups', async () => {
    expect(new Set(await degeneracies('C[C@H](O)CF'))).toEqual(new Set([1]));
  });

  it('keep the sides of double bonds and of rings apart', async () => {
    expect(await degeneracies('C/C=C/C')).toEqual([1]);
    // The two chairs of cis-1,2- and cis-1,4-dimethylcyclohexane are equal, those of trans-1,4 differ (textbook).
    expect((await degeneracies('C[C@H]1CCCC[C@H]1C'))[0]).toBe(2);
    expect((await degeneracies('C[C@H]1CC[C@@H](C)CC1'))[0]).toBe(2);
    expect((await degeneracies('C[C@H]1CC[C@H](C)CC1')).slice(0, 2)).toEqual([1, 1]);
  });
});
