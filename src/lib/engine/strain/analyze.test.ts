import { describe, expect, it } from 'vitest';
import { defaultConformerSearchOptions } from '../conformers/conformers';
import { searchConformers } from '../conformers/search';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import type { ForceFieldSettings } from '../forcefield/forcefield';
import { rotateAbout, torsion } from '../geometry';
import { readMolecule } from '../molecule/read';
import { movedAtoms } from '../molecule/rotatable';
import { writeMolfile } from '../molecule/write';
import { createPeriodicCurve } from '../thermo/periodic-curve';
import { analyzeStrain } from './analyze';
import type { StrainResult } from './strain';

const TETHER = 0.3;
const screened: ForceFieldSettings = {
  variant: 'MMFF94s',
  dielectric: { constant: 4, distanceDependent: true },
};

function strainOf(molfile: string, tether = TETHER): Promise<StrainResult> {
  const forceField = createForceField(readMolecule({ molfile }), screened);
  return analyzeStrain(forceField, { tether, seed: 1 }, unattended);
}

/** The molfile of a molecule's lowest conformer, changed by `turn`. */
async function shaped(
  smiles: string,
  turn: (x: Float64Array, side: (j: number, k: number) => Int32Array) => void = () => undefined,
): Promise<string> {
  const molecule = readMolecule({ smiles });
  const forceField = createForceField(molecule, screened);
  const { conformers } = await searchConformers(
    forceField,
    defaultConformerSearchOptions,
    unattended,
  );
  const x = Float64Array.from(conformers[0].coordinates);
  turn(x, (j, k) => movedAtoms(molecule, j, k));
  return writeMolfile(molecule, x);
}

describe('the strain of a geometry', () => {
  it('is nothing for the lowest conformer itself', async () => {
    const { strain, torsions, complete } = await strainOf(await shaped('CCCO'));
    expect(strain).toBeGreaterThanOrEqual(0);
    expect(strain).toBeLessThan(0.01);
    expect(Math.max(...torsions.map((bond) => bond.strain))).toBeLessThan(0.2);
    expect(complete).toBe(true);
  });

  it('is what gauche butane lies above anti, and lies in its one torsion', async () => {
    const gauche = await shaped('CCCC', (x, side) => rotateAbout(x, side(1, 2), 1, 2, -115));
    const { strain, strainTerms, torsions, lowest } = await strainOf(gauche);
    // MMFF94s with RDKit 2022.09.3: 0.78 kcal/mol. Alkanes have no charges, so screening changes nothing.
    expect(strain).toBeCloseTo(0.78, 1);
    expect(Math.abs(torsion(lowest.coordinates, 0, 1, 2, 3))).toBeCloseTo(180, 0);
    const sum = Object.values(strainTerms).reduce((total: number, term: number) => total + term, 0);
    expect(sum).toBeCloseTo(strain, 6);
    expect(torsions).toHaveLength(1);
    expect(torsions[0].strain).toBeCloseTo(0.78, 1);
    // Its profile begins at nothing, passes over both barriers (5.21 and 3.96) and is what the strain was read from.
    const { profile, angle } = torsions[0];
    expect(Math.min(...profile.map(({ relative }) => relative))).toBe(0);
    expect(Math.max(...profile.map(({ relative }) => relative))).toBeCloseTo(5.21, 1);
    const curve = createPeriodicCurve(
      profile.map((point) => point.angle),
      profile.map(({ relative }) => relative),
    );
    expect(curve.at(angle)).toBeCloseTo(torsions[0].strain, 3);
    expect(Math.abs(torsions[0].angle)).toBeGreaterThan(60);
    expect(Math.abs(torsions[0].angle)).toBeLessThan(70);
    expect(Math.abs(torsions[0].preferredAngle)).toBeCloseTo(180, 0);
  });

  it('falls with a longer tether, and no heavy atom goes much beyond it', async () => {
    const eclipsed = await shaped('CCCC', (x, side) => rotateAbout(x, side(1, 2), 1, 2, 60));
    const results = [];
    for (const tether of [0.02, 0.1, 0.3]) results.push(await strainOf(eclipsed, tether));
    // MMFF94s with RDKit 2022.09.3: 3.96 kcal/mol at the top between anti and gauche.
    expect(results[0].strain).toBeGreaterThan(3);
    expect(results[0].strain).toBeLessThan(4.1);
    expect(results[1].strain).toBeLessThan(results[0].strain);
    expect(results[2].strain).toBeLessThan(results[1].strain);
    // A force of 6 kcal/mol/Å, as of this eclipsed chain, draws an atom 0.06 Å beyond a tether of 100 kcal/mol/Å².
    expect(results[0].relaxed.largestDisplacement).toBeLessThan(0.02 + 0.06);
    expect(results[1].relaxed.largestDisplacement).toBeLessThan(0.1 + 0.06);
  });

  it('names the bond that is strained first', async () => {
    // The amide of N-ethylpropanamide turned half way out of its plane.
    const twisted = await shaped('CCC(=O)NCC', (x, side) => rotateAbout(x, side(2, 4), 2, 4, 50));
    const { strain, torsions } = await strainOf(twisted, 0.1);
    const strains = torsions.map((bond) => bond.strain);
    expect(torsions[0].bond).toEqual(expect.arrayContaining([2, 4]));
    expect(strains).toEqual([...strains].sort((a, b) => b - a));
    // Common practice, no source: an amide resists turning by several kcal/mol, its neighbors hardly.
    expect(strains[0]).toBeGreaterThan(2);
    expect(strains[1]).toBeLessThan(strains[0] / 2);
    expect(strain).toBeGreaterThan(2);
  });

  it('forgives hydrogens in wrong places', async () => {
    const right = await shaped('CCCO');
    const molecule = readMolecule({ molfile: right });
    const x = Float64Array.from(molecule.coordinates ?? []);
    for (let atom = 0; atom < molecule.atomCount; atom++) {
      if (molecule.atomicNumbers[atom] === 1) x[3 * atom] += atom % 2 === 0 ? 0.15 : -0.15;
    }
    const { strain, givenEnergy, relaxed } = await strainOf(writeMolfile(molecule, x));
    expect(givenEnergy - relaxed.energy).toBeGreaterThan(5);
    expect(strain).toBeLessThan(0.01);
  });

  it('needs a geometry', async () => {
    const forceField = createForceField(readMolecule({ smiles: 'CCCC' }), screened);
    await expect(
      analyzeStrain(forceField, { tether: TETHER, seed: 1 }, unattended),
    ).rejects.toMatchObject({ code: 'missing-geometry' });
  });
});
