import { describe, expect, it } from 'vitest';
import { createControl, unattended } from '../control';
import { createForceField } from '../forcefield/create';
import { readMolecule } from '../molecule/read';
import { imaginaryModes } from '../thermo/free-energy';
import { minimumVibrations } from '../thermo/minimum-vibrations';
import { scanTorsion } from './scan';
import { defaultScanOptions } from './scan-result';
import type { TorsionAtoms } from './scan-symmetry';
import { stationaryVibrations } from './stationary-vibrations';

async function scanned(smiles: string, torsion: TorsionAtoms) {
  const forceField = createForceField(readMolecule({ smiles }));
  const options = { ...defaultScanOptions, torsion };
  const { stationary } = await scanTorsion(forceField, options, unattended);
  return { forceField, stationary };
}

const ethane: TorsionAtoms = [2, 0, 1, 5];
const chain: TorsionAtoms = [0, 1, 2, 3];

describe('stationaryVibrations', () => {
  it('finds one imaginary mode at each barrier of butane, none at its minima, and the images alike', async () => {
    const { forceField, stationary } = await scanned('CCCC', chain);
    const analyses = await stationaryVibrations(forceField, chain, stationary, unattended);
    stationary.forEach(({ kind, angle }, n) => {
      const { modes, flaw, rise } = analyses[n];
      expect(flaw).toBeNull();
      expect(rise).toBeUndefined();
      expect(imaginaryModes(modes!)).toBe(kind === 'maximum' ? 1 : 0);
      const image = stationary.findIndex((other) => Math.abs(other.angle + angle) < 0.01);
      if (image !== -1) expect(analyses[image]).toBe(analyses[n]);
    });
  });

  it('finds the saddle of an amide above the place where its profile changes to the other pyramid', async () => {
    const { forceField, stationary } = await scanned('CNC(C)=O', chain);
    const analyses = await stationaryVibrations(forceField, chain, stationary, unattended);
    const top = stationary.findIndex(({ kind }) => kind === 'maximum');
    expect(analyses[top].flaw).toBeNull();
    expect(imaginaryModes(analyses[top].modes!)).toBe(1);
    // The relaxed profile is the lower envelope of two branches, so the saddle of each lies above where they cross.
    expect(analyses[top].rise).toBeGreaterThan(0.02);
    expect(analyses[top].rise).toBeLessThan(12);
  });

  it('gives no free energy to a top whose neighbors are not where its saddle leads', async () => {
    const { forceField, stationary } = await scanned('CCCC', chain);
    const [top] = stationary.filter(({ kind, angle }) => kind === 'maximum' && Math.abs(angle) < 1);
    const anti = stationary.find(({ angle }) => Math.abs(angle) > 170)!;
    // The eclipsed top at 0 parts the gauche forms; between anti and anti it parts nothing.
    const [analysis] = await stationaryVibrations(forceField, chain, [top, anti], unattended);
    expect(analysis.flaw).toBe('not-the-torsion');
    expect(analysis.modes).not.toBeNull();
  });

  it('says so where a minimum is none', async () => {
    const { forceField, stationary } = await scanned('CC', ethane);
    const { coordinates } = stationary.find(({ kind }) => kind === 'maximum')!;
    expect(await minimumVibrations(forceField, coordinates, unattended)).toMatchObject({
      flaw: 'not-a-minimum',
    });
  });

  it('computes nothing more when the time is over', async () => {
    const { forceField, stationary } = await scanned('CC', ethane);
    const clock = { now: () => 100, breathe: () => Promise.resolve(), budget: 0 };
    const analyses = await stationaryVibrations(
      forceField,
      ethane,
      stationary,
      createControl(clock),
    );
    expect(analyses.map(({ flaw }) => flaw)).toEqual(stationary.map(() => 'no-time'));
  });

  it('ends when it is cancelled', async () => {
    const { forceField, stationary } = await scanned('CC', ethane);
    let time = 0;
    const cancelled = new AbortController();
    cancelled.abort(new Error('cancelled'));
    const control = createControl({
      now: () => (time += 50),
      breathe: () => Promise.resolve(),
      signal: cancelled.signal,
    });
    await expect(stationaryVibrations(forceField, ethane, stationary, control)).rejects.toThrow(
      'cancelled',
    );
  });
});
