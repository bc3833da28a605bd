import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import { readMolecule } from '../molecule/read';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { characterizeBond } from './bond-character';
import { labelGeometry } from './labels';
import type { StationaryKind } from './labels';
import { findStarts } from './scan-starts';
import type { TorsionAtoms } from './scan-symmetry';
import { createTorsionDrive } from './torsion-drive';

/** Labels of a molecule turned rigidly to some angles. */
async function labelsOf(
  smiles: string,
  torsion: TorsionAtoms,
  wanted: readonly (readonly [number, StationaryKind])[],
): Promise<string[]> {
  const molecule = readMolecule({ smiles });
  const forceField = createForceField(molecule);
  const drive = createTorsionDrive(forceField, [torsion]);
  const { starts } = await findStarts(forceField, [torsion], { seed: 1 }, unattended);
  const character = characterizeBond(molecule, torsion, symmetryClasses(molecule));
  return wanted.map(([angle, kind]) => {
    const x = starts[0].slice();
    drive.turnTo(x, [angle]);
    return labelGeometry(character, x, kind);
  });
}

// Terms: IUPAC, Pure Appl. Chem. 1996, 68, 2193; s-cis and s-trans, gauche and skew as in common practice, no source.
describe('labelGeometry', () => {
  it('names saturated bonds by what front and rear substituents do', async () => {
    const wanted = [
      [60, 'minimum'],
      [-60, 'minimum'],
      [180, 'minimum'],
      [0, 'maximum'],
      [120, 'maximum'],
    ] as const;
    expect(await labelsOf('CCCC', [0, 1, 2, 3], wanted)).toEqual([
      'gauche',
      'gauche',
      'anti',
      'eclipsed',
      'eclipsed',
    ]);
    expect(await labelsOf('CC', [2, 0, 1, 5], wanted.slice(0, 1))).toEqual(['staggered']);
    expect(await labelsOf('CC(C)(C)CC', [0, 1, 4, 5], wanted.slice(0, 1))).toEqual(['staggered']);
  });

  it('names the sides of a diene and keeps planar for what is planar', async () => {
    const wanted = [
      [180, 'minimum'],
      [0, 'maximum'],
      [14, 'maximum'],
      [45, 'minimum'],
      [-45, 'minimum'],
      [100, 'maximum'],
      [60, 'maximum'],
      [140, 'minimum'],
    ] as const;
    const labels = [
      'planar s-trans',
      'planar s-cis',
      'planar s-cis',
      'gauche (skew)',
      'gauche (skew)',
      'perpendicular',
      'twisted s-cis',
      'twisted s-trans',
    ];
    expect(await labelsOf('C=CC=C', [0, 1, 2, 3], wanted)).toEqual(labels);
    expect(await labelsOf('C=CC=O', [0, 1, 2, 3], wanted)).toEqual(labels);
  });

  it('reads the side from the double bonds, whichever atoms the torsion was given by', async () => {
    // The methyl of isoprene instead of its double bond: 180 away.
    const labels = await labelsOf(
      'C=C(C)C=C',
      [2, 1, 3, 4],
      [
        [0, 'minimum'],
        [180, 'maximum'],
      ],
    );
    expect(labels).toEqual(['planar s-trans', 'planar s-cis']);
  });

  it('names amides and esters by the sequence rules', async () => {
    const wanted = [
      [180, 'minimum'],
      [0, 'minimum'],
      [90, 'maximum'],
      [180, 'maximum'],
    ] as const;
    // C-C-X-C: the methyl opposite the chain lies beside the oxygen.
    const labels = ['Z', 'E', 'perpendicular', 'planar Z'];
    expect(await labelsOf('CC(=O)NC', [0, 1, 3, 4], wanted)).toEqual(labels);
    expect(await labelsOf('CC(=O)OC', [0, 1, 3, 4], wanted)).toEqual(labels);
    // In a formate's nitrogen relative too oxygen outranks hydrogen; with two methyls there is nothing to tell apart.
    expect(await labelsOf('CC(=O)N(C)C', [0, 1, 3, 4], wanted.slice(0, 1))).toEqual(['planar']);
  });

  it('says planar, twisted or perpendicular where sides have no names', async () => {
    const wanted = [
      [0, 'maximum'],
      [45, 'minimum'],
      [90, 'maximum'],
      [170, 'maximum'],
    ] as const;
    const labels = ['planar', 'twisted', 'perpendicular', 'planar'];
    expect(await labelsOf('c1ccccc1-c1ccccc1', [0, 5, 6, 7], wanted)).toEqual(labels);
    expect(await labelsOf('COc1ccccc1', [0, 1, 2, 3], wanted)).toEqual(labels);
  });

  it('falls back on the Klyne-Prelog range', async () => {
    const labels = await labelsOf(
      'CCc1ccccc1',
      [0, 1, 2, 3],
      [
        [90, 'minimum'],
        [0, 'maximum'],
      ],
    );
    expect(labels).toEqual(['synclinal', 'synperiplanar']);
  });
});
