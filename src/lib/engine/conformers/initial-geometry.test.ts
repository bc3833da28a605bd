import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import { distance } from '../geometry';
import { minimize } from '../minimizer/minimize';
import { readMolecule } from '../molecule/read';
import { hasRightStereo } from '../molecule/stereo';
import { initialGeometry, settleConfiguration } from './initial-geometry';

/** Ring systems, cages, stereocentres, E/Z, ions, hypervalent and linear atoms. */
const MOLECULES = [
  'C12C3C4C1C5C2C3C45',
  'C1C2CC3CC1CC(C2)C3',
  'CC1(C)S[C@@H]2[C@H](NC(=O)Cc3ccccc3)C(=O)N2[C@H]1C(=O)O',
  'C[C@]12CC[C@H]3[C@@H](CCC4=CC(=O)CC[C@]34C)[C@@H]1CC[C@@H]2O',
  'C1CCC/C=C/CC1',
  'C/C=C\\C=C\\C#N',
  'CC#CC#CC',
  'CC=C=CC',
  'C[S@](=O)CC',
  '[NH3+][C@@H](C)C(=O)[O-]',
  'CS(=O)(=O)Nc1ccccc1',
  'COP(=O)([O-])OC',
  'C1Cc2ccc(cc2)CCc2ccc1cc2',
];

describe('initialGeometry', () => {
  it.each(MOLECULES)(
    'builds %s with its configuration and minimizes to sound bonds',
    async (smiles) => {
      const molecule = readMolecule({ smiles });
      const x = await initialGeometry(molecule, 1);
      expect(hasRightStereo(molecule, x)).toBe(true);
      const { energy, curvature } = createForceField(molecule);
      const options = { gradientRms: 0.01, maxEvaluations: 2000, curvature };
      expect(await minimize(energy, x, options, unattended)).toMatchObject({ converged: true });
      expect(hasRightStereo(molecule, x)).toBe(true);
      for (const { a, b } of molecule.bonds) {
        expect(distance(x, a, b)).toBeGreaterThan(0.9);
        expect(distance(x, a, b)).toBeLessThan(2);
      }
    },
  );

  it('depends on the seed and on nothing else', async () => {
    const molecule = readMolecule({ smiles: 'OCCN' });
    const first = await initialGeometry(molecule, 5);
    await initialGeometry(molecule, 6);
    expect(await initialGeometry(molecule, 5)).toEqual(first);
    expect(await initialGeometry(molecule, 6)).not.toEqual(first);
  });

  it('refuses a configuration that no geometry has', async () => {
    const molecule = readMolecule({ smiles: 'C[C@H](O)F' });
    const [center] = molecule.stereocenters;
    const opposite = { ...center, clockwise: !center.clockwise };
    const impossible = { ...molecule, stereocenters: [center, opposite] };
    await expect(initialGeometry(impossible, 1)).rejects.toMatchObject({ code: 'no-conformer' });
  });
});

describe('settleConfiguration', () => {
  it('makes open double bonds trans and settles open centers', async () => {
    const settled = await settleConfiguration(readMolecule({ smiles: 'CC=CC(O)F' }));
    expect(settled.stereobonds).toMatchObject([{ atoms: [0, 1, 2, 3], cis: false }]);
    expect(settled.stereocenters.map(({ atom }) => atom)).toEqual([3]);
  });

  it('leaves a molecule alone whose configuration is stated', async () => {
    const molecule = readMolecule({ smiles: 'C/C=C/[C@H](O)F' });
    expect(await settleConfiguration(molecule)).toBe(molecule);
  });
});
