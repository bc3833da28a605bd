import { describe, expect, it } from 'vitest';
import { readMolecule, splitRecords } from './read';
import { writeMolfile, writeSdf } from './write';

const molecule = readMolecule({ smiles: '[NH3+][13CH2]C(=O)[O-] glycine' });
const coordinates = Float64Array.from(
  { length: 3 * molecule.atomCount },
  (_, n) => Math.sin(n * n) * 9 - (n % 2 ? 0 : 1e-9),
);

describe('writeMolfile', () => {
  it('writes fixed columns, charges and isotopes', () => {
    const lines = writeMolfile(molecule, coordinates).split('\n');
    expect(lines[0]).toBe('glycine');
    expect(lines[1].slice(20, 22)).toBe('3D');
    expect(lines[3]).toBe(' 10  9  0  0  0  0            999 V2000');
    expect(lines[4]).toMatch(/^.{30} N {3}0( {2}0){11}$/);
    expect(lines).toContain('M  CHG  2   1   1   5  -1');
    expect(lines).toContain('M  ISO  1   2  13');
    expect(lines.join('\n')).not.toContain('-0.0000');
  });

  it('keeps title and comment to one line each', () => {
    const lines = writeMolfile(molecule, coordinates, {
      title: 'a\nb',
      comment: 'x'.repeat(200),
    }).split('\n');
    expect(lines[0]).toBe('a b');
    expect(lines[2].length).toBe(80);
    expect(lines[3]).toContain('V2000');
  });
});

describe('writeSdf', () => {
  it('writes records with data fields that cannot break the format', () => {
    const sdf = writeSdf([
      { molecule, coordinates, data: { 'energy <kcal/mol>': -1.5, note: 'one\n\ntwo' } },
      { molecule, coordinates, title: 'second' },
    ]);
    const records = splitRecords(sdf);
    expect(records.length).toBe(2);
    expect(records[0]).toContain('>  <energy_kcal/mol_>\n-1.5\n\n');
    expect(records[0]).toContain('>  <note>\none\ntwo\n\n');
    const second = readMolecule({ molfile: records[1] });
    expect(second.name).toBe('second');
    expect(second.smiles).toBe(molecule.smiles);
  });
});
