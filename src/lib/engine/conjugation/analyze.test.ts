import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import { createForceField } from '../forcefield/create';
import { readMolecule } from '../molecule/read';
import { ROOM_TEMPERATURE } from '../units';
import { analyzeConjugation } from './analyze';
import type { BondConjugation } from './conjugation';
import { overlapAt } from './pi-axis';

async function bondsOf(smiles: string, temperature = ROOM_TEMPERATURE): Promise<BondConjugation[]> {
  const forceField = createForceField(readMolecule({ smiles }));
  const { bonds } = await analyzeConjugation(forceField, { temperature, seed: 1 }, unattended);
  return [...bonds];
}

async function openBond(smiles: string, temperature?: number): Promise<BondConjugation> {
  const open = (await bondsOf(smiles, temperature)).find(({ inRing }) => !inRing);
  if (!open) throw new Error('no bond that turns');
  return open;
}

describe('buta-1,3-diene', async () => {
  const bond = await openBond('C=CC=C');

  it('has a planar s-trans and a gauche s-cis form', () => {
    expect(bond.kind).toBe('diene');
    expect(bond.twist).toBeCloseTo(0, 1);
    expect(Math.abs(bond.sTrans?.angle ?? NaN)).toBeCloseTo(180, 1);
    expect(bond.sTrans?.relative).toBeCloseTo(0, 5);
    // MMFF94s with RDKit 2022.09.3: 2.47 kcal/mol near 45°.
    expect(bond.difference).toBeCloseTo(2.47, 1);
    expect(bond.sCis?.angle).toBeGreaterThan(35);
    expect(bond.sCis?.angle).toBeLessThan(50);
  });

  it('pays for the planar s-cis form that a Diels-Alder reaction needs, and for the way there', () => {
    // MMFF94s with RDKit 2022.09.3: 3.43 at 0°, 6.18 at the top.
    expect(bond.planarSCisCost).toBeCloseTo(3.43, 1);
    expect(bond.barrier).toBeCloseTo(6.18, 1);
  });

  it('is counted from 0 as s-cis however the input writes it', async () => {
    const other = await openBond('C(=C)C=C');
    expect(other.difference).toBeCloseTo(bond.difference ?? NaN, 3);
    expect(other.planarSCisCost).toBeCloseTo(bond.planarSCisCost ?? NaN, 3);
    expect(other.sCisFraction).toBeCloseTo(bond.sCisFraction ?? NaN, 3);
    expect(other.meanOverlap).toBeCloseTo(bond.meanOverlap ?? NaN, 3);
  });

  it('is all in its lowest form in the cold, and mixes with heat', async () => {
    const cold = await openBond('C=CC=C', 10);
    expect(cold.sCisFraction).toBeCloseTo(0, 6);
    expect(cold.meanOverlap).toBeCloseTo(overlapAt(cold.twist ?? NaN), 1);
    const hot = await openBond('C=CC=C', 2000);
    expect(hot.sCisFraction).toBeGreaterThan(bond.sCisFraction ?? NaN);
    expect(hot.meanOverlap).toBeLessThan(bond.meanOverlap ?? NaN);
  });
});

it('2,3-dimethylbutadiene is twisted s-cis about as much as s-trans', async () => {
  const bond = await openBond('CC(=C)C(=C)C');
  expect(bond.torsion).toEqual([2, 1, 3, 4]);
  expect(Math.abs(bond.difference ?? NaN)).toBeLessThan(0.5);
  expect(bond.sCisFraction).toBeGreaterThan(0.3);
});

it('both planar forms of acrolein are minima', async () => {
  const { sCis, sTrans, difference, planarSCisCost } = await openBond('C=CC=O');
  expect(sCis?.label).toBe('planar s-cis');
  expect(sTrans?.label).toBe('planar s-trans');
  // The planar form is the s-cis minimum itself.
  expect(planarSCisCost).toBeCloseTo(difference ?? NaN, 3);
});

it.each([
  ['biphenyl', 'c1ccccc1-c1ccccc1', 'biaryl'],
  ['N-methylformamide', 'CNC=O', 'amide'],
])('s-cis and s-trans mean nothing in %s', async (_name, smiles, kind) => {
  const bond = await openBond(smiles);
  expect(bond).toMatchObject({
    kind,
    sCis: null,
    sTrans: null,
    difference: null,
    sCisFraction: null,
    planarSCisCost: null,
  });
  expect(bond.barrier).toBeGreaterThan(1);
  expect(bond.profile?.length).toBeGreaterThanOrEqual(24);
});

it('hindrance twists a biaryl and takes its overlap away', async () => {
  const free = await openBond('c1ccccc1-c1ccccc1');
  const hindered = await openBond('Cc1cccc(C)c1-c1c(C)cccc1C');
  // Common practice, no source: biphenyl lies near 45°, its four-times ortho-methylated cousin near 90°.
  expect(free.twist).toBeGreaterThan(30);
  expect(free.twist).toBeLessThan(60);
  expect(hindered.twist).toBeGreaterThan(80);
  expect(hindered.meanOverlap).toBeLessThan(0.05);
  expect(hindered.meanOverlap).toBeLessThan(free.meanOverlap ?? NaN);
});

it('a bond in a ring is reported with its twist', async () => {
  // MMFF94s with RDKit 2022.09.3: torsion 7.1° (measured, by electron diffraction, is about 18°).
  const [bond] = await bondsOf('C1=CC=CCC1');
  expect(bond).toMatchObject({ inRing: true, kind: 'diene', torsion: [0, 1, 2, 3] });
  expect(bond.twist).toBeGreaterThan(3);
  expect(bond.twist).toBeLessThan(10);
});

it('a molecule without conjugated bonds has none to report', async () => {
  expect(await bondsOf('CCC')).toEqual([]);
});
