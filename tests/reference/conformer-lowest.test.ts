/**
 * The lowest conformer of varied molecules against the lowest of 300 RDKit conformers (RDKit 2022.09.3, ETKDG and
 * MMFF94s; data/conformer-lowest.py): never higher by more than the minimizers' tolerance.
 */
import { describe, expect, it } from 'vitest';
import { defaultConformerSearchOptions } from '$lib/engine/conformers/conformers';
import { searchConformers } from '$lib/engine/conformers/search';
import { unattended } from '$lib/engine/control';
import { createForceField } from '$lib/engine/forcefield/create';
import { readMolecule } from '$lib/engine/molecule/read';
import recorded from './data/conformer-lowest.json';

/** RDKit stops at gradients that leave this much, kcal/mol. */
const TOLERANCE = 0.001;
/** A chain, an acid, a peptide, a sugar, a zwitterion, a dianion, a bicycle, an amine, a macrocycle, conjugation. */
const CHECKED = [
  'butane',
  'ibuprofen',
  'aspirin',
  'alanine dipeptide',
  'beta-D-glucose',
  'phenylalanine zwitterion',
  'adenosine monophosphate dianion',
  'penicillin G',
  'menthol',
  'sulfamethoxazole',
  'fluoxetine',
  'cyclotetraglycine',
  'retinal',
];

describe('the lowest conformer', () => {
  it.each(recorded.molecules.filter(({ name }) => CHECKED.includes(name)))(
    'of $name is not above that of 300 RDKit conformers',
    async ({ smiles, lowest }) => {
      const forceField = createForceField(readMolecule({ smiles }));
      const options = { ...defaultConformerSearchOptions, limit: 10 };
      const { conformers } = await searchConformers(forceField, options, unattended);
      expect(conformers[0].energy).toBeLessThanOrEqual(lowest + TOLERANCE);
    },
    60_000,
  );

  it('is checked for every molecule listed', () => {
    const names = recorded.molecules.map(({ name }) => name);
    expect(names).toEqual(expect.arrayContaining(CHECKED));
  });
});
