import { describe, expect, it } from 'vitest';
import { readMolecule } from '../molecule/read';
import { findSmallRings } from './small-rings';

/** How many relevant cycles there are of each size. */
function sizes(smiles: string): Record<number, number> {
  const counts: Record<number, number> = {};
  for (const ring of findSmallRings(readMolecule({ smiles }))) {
    counts[ring.length] = (counts[ring.length] ?? 0) + 1;
  }
  return counts;
}

// Counts follow from the graphs; relevant cycles as Vismara (Electron. J. Comb. 1997, 4, R9) defines them.
describe('small rings', () => {
  it('counts every face of a cage', () => {
    expect(sizes('C12C3C4C1C5C2C3C45')).toEqual({ 4: 6 });
  });

  it('leaves out envelopes of smaller rings', () => {
    expect(sizes('C1CC2CC1C2')).toEqual({ 4: 1, 5: 2 });
    expect(sizes('C1CC2CC12')).toEqual({ 3: 1, 4: 1 });
    expect(sizes('C1CC2CCC1C2')).toEqual({ 5: 2 });
    expect(sizes('c1ccc2ccccc2c1')).toEqual({ 6: 2 });
  });

  it('sees rings of three to six atoms only', () => {
    expect(sizes('C1CCCCCC1')).toEqual({});
    expect(sizes('C1CCCCC1')).toEqual({ 6: 1 });
    expect(sizes('CCC')).toEqual({});
  });
});
