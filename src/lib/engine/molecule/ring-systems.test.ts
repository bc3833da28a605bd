import { describe, expect, it } from 'vitest';
import { readMolecule } from './read';
import { ringSystems } from './ring-systems';

const sizes = (smiles: string): number[] =>
  ringSystems(readMolecule({ smiles })).map(({ length }) => length);

describe('ringSystems', () => {
  it.each([
    ['CCCC', []],
    ['c1ccccc1-c1ccc2ccccc2c1', [10, 6]],
    // Spiro rings share one atom and are one system; so are the four rings of a steroid, however they are found.
    ['C1CCC2(CC1)CCCC2', [10]],
    ['C1CCC2C(C1)CCC1C2CCC2CCCC12', [17]],
  ])('of %s have %j atoms', (smiles, expected) => expect(sizes(smiles)).toEqual(expected));
});
