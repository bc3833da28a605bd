import { ConformerGenerator, ForceFieldMMFF94 } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { createMolecule } from './build';
import type { Molecule } from './molecule';
import { toOpenchemlib, type OpenchemlibMolecule } from './openchemlib';
import { readMolecule } from './read';
import { stereoOf } from './stereo';

function geometryOf(molecule: Molecule, { ocl, toOcl }: OpenchemlibMolecule): Float64Array {
  const x = new Float64Array(3 * molecule.atomCount);
  for (let atom = 0; atom < molecule.atomCount; atom++) {
    const place = toOcl[atom];
    x.set([ocl.getAtomX(place), ocl.getAtomY(place), ocl.getAtomZ(place)], 3 * atom);
  }
  return x;
}

describe('toOpenchemlib', () => {
  it.each([
    '[H]O[C@]([H])(F)C([2H])Cl',
    'Cl[C@@H]1[C@H](Cl)OCCO1',
    'C[S@](=O)CC',
    'F/C(Cl)=C(/[H])Br',
    'F/C(Cl)=C(\\[H])Br',
  ])('hands over the configuration of %s', (smiles) => {
    const molecule = readMolecule({ smiles });
    const translated = toOpenchemlib(molecule);
    expect(molecule.stereocenters.length + molecule.stereobonds.length).toBeGreaterThan(0);
    expect(new ConformerGenerator(3).getOneConformerAsMolecule(translated.ocl)).not.toBeNull();
    expect(translated.ocl.getAllAtoms()).toBe(molecule.atomCount);
    expect(stereoOf(molecule, geometryOf(molecule, translated))).toEqual([]);
  });

  it('hands over a geometry: its energy does not depend on the order of the atoms', () => {
    const molecule = readMolecule({ smiles: '[H]OC([H])([H])C(=O)N' });
    const translated = toOpenchemlib(molecule);
    new ConformerGenerator(3).getOneConformerAsMolecule(translated.ocl);
    const x = geometryOf(molecule, translated);
    expect(geometryOf(molecule, toOpenchemlib(molecule, x))).toEqual(x);
    const last = molecule.atomCount - 1;
    const reversed = createMolecule({
      atomicNumbers: [...molecule.atomicNumbers].reverse(),
      bonds: molecule.bonds.map(({ a, b, order }) => ({ a: last - a, b: last - b, order })),
    });
    const places = Float64Array.from(x, (_, n) => x[3 * (last - Math.floor(n / 3)) + (n % 3)]);
    const energies = [toOpenchemlib(molecule, x), toOpenchemlib(reversed, places)].map(({ ocl }) =>
      new ForceFieldMMFF94(ocl, 'MMFF94s').getTotalEnergy(),
    );
    expect(energies[0]).toBeCloseTo(energies[1], 6);
    expect(Math.abs(energies[0])).toBeGreaterThan(0.1);
  });
});
