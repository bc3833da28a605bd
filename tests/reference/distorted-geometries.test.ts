/**
 * Energies, types and charges of 174 randomly distorted molecules against RDKit 2022.09.3 (recorded by
 * data/distorted-geometries.py) and against openchemlib's own force field, computed here.
 */
import { ForceFieldMMFF94, Molecule as OpenchemlibMolecule } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { createForceField } from '$lib/engine/forcefield/create';
import type { ForceField, TermEnergies, Variant } from '$lib/engine/forcefield/forcefield';
import { defaultForceFieldSettings } from '$lib/engine/forcefield/forcefield';
import { readMolecule } from '$lib/engine/molecule/read';
import type { RecordedMolecule } from './recorded-geometries';
import { coveredMolecules, recordedMolecules, refusedMolecules } from './recorded-geometries';

/** kcal/mol; both programs read the same published parameters, so only rounding of constants is left. */
const ENERGY_TOLERANCE = 1e-3;
/** Electron charges; RDKit's are recorded to six decimals. */
const CHARGE_TOLERANCE = 2e-6;

const variants: Variant[] = ['MMFF94', 'MMFF94s'];

/** Every force field is asked twice. */
const forceFields = new Map<string, ForceField>();

function forceFieldOf({ name, molfile }: RecordedMolecule, variant: Variant): ForceField {
  const known = forceFields.get(`${name} ${variant}`);
  if (known) return known;
  const settings = { ...defaultForceFieldSettings, variant };
  const forceField = createForceField(readMolecule({ molfile }), settings);
  forceFields.set(`${name} ${variant}`, forceField);
  return forceField;
}

/** Every number that differs from the recorded one, in words. */
function deviationsFrom(recorded: RecordedMolecule, variant: Variant): string[] {
  const { total, terms, types, charges } = recorded[variant];
  const forceField = forceFieldOf(recorded, variant);
  const x = Float64Array.from(recorded.coordinates);
  const ours = forceField.terms(x);
  const deviations: string[] = [];
  const compare = (what: string, value: number, expected: number, tolerance: number): void => {
    if (!(Math.abs(value - expected) <= tolerance))
      deviations.push(`${variant} ${what}: ${value}, RDKit ${expected}`);
  };
  types.forEach((type, atom) => {
    compare(`type of atom ${atom}`, forceField.atomTypes[atom], type, 0);
    compare(`charge of atom ${atom}`, forceField.charges[atom], charges[atom], CHARGE_TOLERANCE);
  });
  for (const name of Object.keys(terms) as (keyof TermEnergies)[])
    compare(name, ours[name], terms[name], ENERGY_TOLERANCE);
  compare('total', forceField.energy(x, new Float64Array(x.length)), total, ENERGY_TOLERANCE);
  return deviations;
}

/** Why a program's number is not ours: the difference of the totals by variant, theirs minus ours, and the reason found. */
interface KnownDifference {
  differences: Partial<Record<Variant, number>>;
  reason: string;
}

const rdkitDiffers: Record<string, KnownDifference> = {
  tropolone: {
    differences: { MMFF94: 13.893, MMFF94s: 13.893 },
    reason:
      'RDKit takes the bonds of the seven-membered ring as aromatic; MMFF94 has aromatic rings of five and six atoms only (part I), and openchemlib agrees with us',
  },
};

const openchemlibDiffers: Record<string, KnownDifference> = {
  azulene: {
    differences: { MMFF94: 25.45, MMFF94s: 25.45 },
    reason: 'openchemlib gives the ten-membered perimeter delocalized bonds; RDKit agrees with us',
  },
  'acetone hydrazone': {
    differences: { MMFF94: 5.5749, MMFF94s: 4.6892 },
    reason:
      'openchemlib does not type the amino nitrogen of C=N-N as 10 (part I, table III, NN=C); RDKit agrees with us',
  },
  indole: {
    differences: { MMFF94s: 0.0026 },
    reason: "openchemlib's MMFF94s table shortens the constant of 64: 37, 63, 64 to -0.01",
  },
  benzothiophene: {
    differences: { MMFF94s: 0.0235 },
    reason: "openchemlib's MMFF94s table shortens the constant of 64: 37, 63, 64 to -0.01",
  },
};

describe('distorted geometries against RDKit', () => {
  it.each(coveredMolecules.filter(({ name }) => !(name in rdkitDiffers)))(
    '$name $smiles',
    (recorded) => {
      const deviations = variants.flatMap((variant) => deviationsFrom(recorded, variant));
      expect(deviations).toEqual([]);
    },
  );

  it.each(Object.entries(rdkitDiffers))('%s differs for a known reason', (name, known) => {
    const recorded = recordedMolecules.find((molecule) => molecule.name === name)!;
    for (const variant of variants) {
      const difference = recorded[variant].total - ourEnergy(recorded, variant);
      expect(Math.abs(difference - known.differences[variant]!)).toBeLessThan(ENERGY_TOLERANCE);
    }
  });

  it('compares at least 40 molecules', () => {
    expect(coveredMolecules.length - Object.keys(rdkitDiffers).length).toBeGreaterThanOrEqual(40);
  });

  it.each(Object.keys(refusedMolecules))('%s is refused: MMFF94 has no type for it', (name) => {
    const recorded = recordedMolecules.find((molecule) => molecule.name === name)!;
    expect(() => forceFieldOf(recorded, 'MMFF94s')).toThrowError(
      expect.objectContaining({ code: 'unsupported-environment' }) as Error,
    );
  });
});

function ourEnergy(recorded: RecordedMolecule, variant: Variant): number {
  const x = Float64Array.from(recorded.coordinates);
  return forceFieldOf(recorded, variant).energy(x, new Float64Array(x.length));
}

/** openchemlib's total energy of the recorded geometry. */
function openchemlibEnergy(recorded: RecordedMolecule, variant: Variant): number {
  const molecule = OpenchemlibMolecule.fromMolfile(recorded.molfile);
  molecule.ensureHelperArrays(OpenchemlibMolecule.cHelperRings);
  for (let atom = 0; atom < molecule.getAllAtoms(); atom++) {
    molecule.setAtomX(atom, recorded.coordinates[3 * atom]);
    molecule.setAtomY(atom, recorded.coordinates[3 * atom + 1]);
    molecule.setAtomZ(atom, recorded.coordinates[3 * atom + 2]);
  }
  return new ForceFieldMMFF94(molecule, variant).getTotalEnergy();
}

describe('distorted geometries against openchemlib', () => {
  it.each(coveredMolecules)('$name $smiles', (recorded) => {
    for (const variant of variants) {
      const difference = openchemlibEnergy(recorded, variant) - ourEnergy(recorded, variant);
      const known = openchemlibDiffers[recorded.name]?.differences[variant] ?? 0;
      expect(Math.abs(difference - known), `${variant}: ${difference}`).toBeLessThan(
        ENERGY_TOLERANCE,
      );
    }
  });
});
