import { describe, expect, it } from 'vitest';
import { defaultConformerSearchOptions } from '../conformers/conformers';
import { searchConformers } from '../conformers/search';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import type { Molecule } from '../molecule/molecule';
import { readMolecule } from '../molecule/read';
import { rotatableBonds } from '../molecule/rotatable';
import { createTorsionNamer } from './name-torsion';

/** Geometries of a molecule's conformers, lowest first. */
async function conformersOf(molecule: Molecule): Promise<Float64Array[]> {
  const forceField = createForceField(molecule, {
    variant: 'MMFF94s',
    dielectric: { constant: 1, distanceDependent: false },
  });
  const options = { ...defaultConformerSearchOptions, effort: 'quick' } as const;
  const { conformers } = await searchConformers(forceField, options, unattended);
  return conformers.map(({ coordinates }) => coordinates);
}

describe('createTorsionNamer', () => {
  it('names butane anti and gauche, with the Klyne-Prelog terms ap and sc', async () => {
    const molecule = readMolecule({ smiles: 'CCCC' });
    const namer = createTorsionNamer(molecule, rotatableBonds(molecule)[0].torsion);
    const named = (await conformersOf(molecule)).map((x) => namer.name(x));
    expect(named.map(({ label }) => label)).toEqual(['anti', 'gauche']);
    expect(named[0].range).toBe('ap');
    expect(named[1].range).toMatch(/^[+-]sc$/);
    // MMFF94s: 65 degrees (RDKit 2022.09.3 gives the same).
    expect(Math.abs(named[1].angle)).toBeGreaterThan(60);
    expect(Math.abs(named[1].angle)).toBeLessThan(70);
  });

  it('measures a diene over its two double bonds, whichever torsion was asked for', async () => {
    const molecule = readMolecule({ smiles: 'C=CC(C)=C' });
    // Over the methyl group the s-trans form would seem to be at 0 degrees.
    const namer = createTorsionNamer(molecule, [0, 1, 2, 3]);
    expect(namer.atoms).toEqual([0, 1, 2, 4]);
    const [lowest] = (await conformersOf(molecule)).map((x) => namer.name(x));
    expect(lowest.label).toBe('planar s-trans');
    expect(Math.abs(lowest.angle)).toBeGreaterThan(170);
  });
});
