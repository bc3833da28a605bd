import { describe, expect, it } from 'vitest';
import { readMolecule } from './read';
import { writeMolfile } from './write';

const strip = (smiles: string) => readMolecule({ smiles }, { largestPart: true });

describe('reading the largest part', () => {
  it.each([
    ['[Na+].CC(=O)[O-]', 'CC(=O)[O-]'],
    ['Cl.C[C@H](N)C(=O)O', 'C[C@H](N)C(=O)O'],
    ['O.O.C/C=C/C', 'C/C=C/C'],
    ['CCO', 'CCO'],
    ['CO.CS', 'CS'],
  ])('of %s is %s', (mixture, kept) => {
    expect(strip(mixture).smiles).toBe(readMolecule({ smiles: kept }).smiles);
  });

  it('keeps order, geometry and configuration of a molfile', () => {
    const geometry = Float64Array.from([
      0, 0, 0, 1.3, 0.5, 0.2, -0.5, 1.3, 0.1, -0.6, -0.7, 1.0, -0.2, -0.8, -0.8,
    ]);
    const chiral = readMolecule({ smiles: '[C@](F)(Cl)(Br)[H]' });
    const alone = writeMolfile(chiral, geometry);
    const read = readMolecule({ molfile: alone });
    // The same record with an ion put before it.
    const lines = alone.split('\n');
    const [atoms, bonds] = [lines.slice(4, 9), lines.slice(9, 13)];
    const salt = [
      ...lines.slice(0, 3),
      '  6  4  0  0  0  0            999 V2000',
      '    9.0000    0.0000    0.0000 Na  0  3  0  0  0  0  0  0  0  0  0  0',
      ...atoms,
      ...bonds.map((bond) => {
        const [a, b] = [Number(bond.slice(0, 3)) + 1, Number(bond.slice(3, 6)) + 1];
        return `${String(a).padStart(3)}${String(b).padStart(3)}${bond.slice(6)}`;
      }),
      'M  END',
      '',
    ].join('\n');
    const kept = readMolecule({ molfile: salt }, { largestPart: true });
    expect(kept.smiles).toBe(read.smiles);
    expect([...kept.atomicNumbers]).toEqual([...read.atomicNumbers]);
    expect([...kept.coordinates!]).toEqual([...read.coordinates!]);
    expect(() => readMolecule({ molfile: salt })).toThrow(/2 separate parts/);
  });
});
