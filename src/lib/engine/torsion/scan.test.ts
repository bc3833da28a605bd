import { describe, expect, it } from 'vitest';
import { createControl, unattended } from '../control';
import type { ControlOptions } from '../control';
import { InputError } from '../errors';
import { createForceField } from '../forcefield/create';
import type { ForceField } from '../forcefield/forcefield';
import { torsion as torsionAngle } from '../geometry';
import { readMolecule } from '../molecule/read';
import { turnBetween } from '../units';
import { scanTorsion } from './scan';
import { defaultScanOptions } from './scan-result';
import type { ScanOptions, ScanResult } from './scan-result';
import type { TorsionAtoms } from './scan-symmetry';

function fieldOf(smiles: string): ForceField {
  return createForceField(readMolecule({ smiles }));
}

async function scan(
  smiles: string,
  torsion: TorsionAtoms,
  options: Partial<ScanOptions> = {},
): Promise<ScanResult> {
  return scanTorsion(fieldOf(smiles), { ...defaultScanOptions, torsion, ...options }, unattended);
}

function energyAt({ points }: ScanResult, angle: number): number {
  return points.find((point) => Math.abs(turnBetween(point.angle, angle)) < 1e-6)!.energy;
}

/** Kind, angle to a degree and height to a hundredth of each stationary point from 0 to 180. */
function heights({ stationary }: ScanResult) {
  return stationary
    .filter(({ angle }) => angle >= 0)
    .map(({ kind, angle, relative, label }) => ({ kind, angle, relative, label }));
}

const ethane: TorsionAtoms = [2, 0, 1, 5];
const chain: TorsionAtoms = [0, 1, 2, 3];

describe('scanTorsion', () => {
  it('gives ethane its threefold barrier of 3.215 kcal/mol', async () => {
    // MMFF94s by RDKit 2022.09.3 and openchemlib 9.25.
    const result = await scan('CC', ethane);
    expect(result.symmetry).toEqual({ mirror: true, period: 120 });
    expect(result.stationary.map(({ label }) => label)).toEqual([
      'eclipsed',
      'staggered',
      'eclipsed',
      'staggered',
      'eclipsed',
      'staggered',
    ]);
    for (const { kind, relative } of result.stationary) {
      expect(relative).toBeCloseTo(kind === 'maximum' ? 3.215 : 0, 2);
    }
  });

  it('finds anti and gauche butane and the barriers between them', async () => {
    // MMFF94s by RDKit 2022.09.3: gauche 0.78, barriers 3.96 and 5.21.
    const [top, gauche, pass, anti] = heights(await scan('CCCC', chain));
    expect(top).toMatchObject({ kind: 'maximum', angle: 0, label: 'eclipsed' });
    expect(top.relative).toBeCloseTo(5.21, 2);
    expect(gauche).toMatchObject({ kind: 'minimum', label: 'gauche' });
    expect(gauche.relative).toBeCloseTo(0.78, 2);
    expect(pass).toMatchObject({ kind: 'maximum', label: 'eclipsed' });
    expect(pass.relative).toBeCloseTo(3.96, 2);
    expect(anti).toMatchObject({ kind: 'minimum', angle: 180, label: 'anti', relative: 0 });
  });

  it('finds the twisted s-cis form of butadiene, its planar saddle and the barrier', async () => {
    // MMFF94s by RDKit 2022.09.3: gauche 2.47 near 45 degrees, planar s-cis 3.43, barrier 6.18 on a grid of 1 degree.
    const [planar, gauche, barrier, trans] = heights(await scan('C=CC=C', chain));
    expect(planar).toMatchObject({ kind: 'maximum', angle: 0, label: 'planar s-cis' });
    expect(planar.relative).toBeCloseTo(3.43, 1);
    expect(gauche).toMatchObject({ kind: 'minimum', label: 'gauche (skew)' });
    expect(Math.abs(gauche.angle - 45)).toBeLessThan(3);
    expect(Math.abs(gauche.relative - 2.47)).toBeLessThan(0.02);
    expect(Math.abs(barrier.relative - 6.18)).toBeLessThan(0.02);
    expect(trans).toMatchObject({ kind: 'minimum', angle: 180, label: 'planar s-trans' });
  });

  it('knows the two amides and their names', async () => {
    const result = await scan('CC(=O)NC', [0, 1, 3, 4]);
    const minima = result.stationary.filter(({ kind }) => kind === 'minimum');
    // Trans-N-methylacetamide has C and C antiperiplanar, O and C synperiplanar: Z by the sequence rules.
    expect(minima.find(({ angle }) => angle > 170)).toMatchObject({ label: 'Z', relative: 0 });
    expect(minima.find(({ angle }) => Math.abs(angle) < 10)?.label).toBe('E');
  });

  it('returns each geometry at its angle with its energy', async () => {
    const field = fieldOf('CCCC');
    const result = await scan('CCCC', chain);
    expect(result.points.map(({ angle }) => angle)).toEqual(
      Array.from({ length: 24 }, (_, n) => -165 + 15 * n),
    );
    for (const { angle, reached, energy, coordinates, converged } of result.points) {
      expect(converged).toBe(true);
      expect(Math.abs(turnBetween(angle, reached))).toBeLessThan(0.1);
      expect(torsionAngle(coordinates, ...chain)).toBe(reached);
      expect(field.energy(coordinates, new Float64Array(coordinates.length))).toBeCloseTo(
        energy,
        8,
      );
    }
  });

  it('is exactly its own mirror image for an achiral molecule, and is not for a chiral one', async () => {
    const achiral = await scan('CC(=O)NC', [0, 1, 3, 4]);
    for (const { angle, energy } of achiral.points) {
      expect(energyAt(achiral, -angle)).toBe(energy);
    }
    const chiral = await scan('C[C@H](Cl)C(F)=O', [0, 1, 3, 4]);
    expect(chiral.symmetry.mirror).toBe(false);
    const differences = chiral.points.map(({ angle, energy }) =>
      Math.abs(energyAt(chiral, -angle) - energy),
    );
    expect(Math.max(...differences)).toBeGreaterThan(0.2);
    const enantiomer = await scan('C[C@@H](Cl)C(F)=O', [0, 1, 3, 4]);
    for (const { angle, energy } of chiral.points) {
      expect(Math.abs(energyAt(enantiomer, -angle) - energy)).toBeLessThan(0.01);
    }
  });

  it.each([
    ['CC(=O)NC', [0, 1, 3, 4]],
    ['CCC(C)C', [3, 2, 1, 0]],
    ['OCCO', chain],
    ['CC(C)c1ccccc1C(N)=O', [0, 1, 3, 4]],
  ] satisfies [string, TorsionAtoms][])(
    'gives %s one profile from any seed and read from either end',
    async (smiles, torsion) => {
      const [i, j, k, l] = torsion;
      const result = await scan(smiles, torsion);
      const others = [
        await scan(smiles, torsion, { seed: 7 }),
        await scan(smiles, [l, k, j, i], { seed: 3 }),
      ];
      for (const other of others) {
        for (const { angle, energy } of result.points) {
          expect(Math.abs(energyAt(other, angle) - energy)).toBeLessThan(0.01);
        }
        expect(other.stationary.map(({ label }) => label)).toEqual(
          result.stationary.map(({ label }) => label),
        );
      }
    },
  );

  it('gives one profile for a molecule however its atoms are numbered', async () => {
    const first = await scan('CC(C)CO', [0, 1, 3, 4]);
    const second = await scan('OCC(C)C', [3, 2, 1, 0]);
    const third = await scan('C(O)C(C)C', [4, 2, 0, 1]);
    for (const { angle, energy } of first.points) {
      expect(Math.abs(energyAt(second, angle) - energy)).toBeLessThan(0.01);
      expect(Math.abs(energyAt(third, angle) - energy)).toBeLessThan(0.01);
    }
  });

  it.each([
    // An amine whose two pyramids differ by next to nothing at 0 and 180 degrees, and change into each other at a kink.
    ['Nc1ccccc1', [7, 0, 1, 2]],
    ['COC=C', [0, 1, 2, 3]],
    ['OCCO', chain],
  ] satisfies [string, TorsionAtoms][])(
    'lists the stationary points of %s in turn and mirrored',
    async (smiles, torsion) => {
      const { stationary } = await scan(smiles, torsion);
      stationary.forEach(({ kind }, n) => {
        expect(kind).not.toBe(stationary[(n + 1) % stationary.length].kind);
      });
      for (const { kind, angle, energy } of stationary) {
        const image = stationary.find(
          (other) => other.kind === kind && Math.abs(turnBetween(other.angle, -angle)) < 0.5,
        );
        expect(Math.abs(image!.energy - energy)).toBeLessThan(1e-4);
      }
    },
  );

  it('takes conformers that are known already', async () => {
    const searched = await scan('CCCC', chain);
    const conformers = searched.stationary
      .filter(({ kind }) => kind === 'minimum')
      .map(({ coordinates }) => coordinates);
    const given = await scan('CCCC', chain, { conformers });
    for (const { angle, energy } of searched.points) {
      expect(Math.abs(energyAt(given, angle) - energy)).toBeLessThan(0.01);
    }
  });

  it('gives bit for bit the same numbers again', async () => {
    const options = { step: 30 };
    const first = await scan('OCCO', chain, options);
    await scan('CC', ethane, options);
    const second = await scan('OCCO', chain, options);
    expect(second.points).toEqual(first.points);
    expect(second.stationary).toEqual(first.stationary);
  });

  it('scans rigidly, never below the relaxed profile', async () => {
    const relaxed = await scan('CCCC', chain);
    const rigid = await scan('CCCC', chain, { relaxed: false });
    expect(rigid.relaxed).toBe(false);
    for (const { angle, energy } of rigid.points) {
      expect(energy).toBeGreaterThan(energyAt(relaxed, angle) - 1e-3);
    }
    expect(energyAt(rigid, 0)).toBeGreaterThan(energyAt(relaxed, 0) + 0.5);
    const kinds = rigid.stationary.map(({ kind }) => kind);
    expect(kinds).toEqual(['maximum', 'minimum', 'maximum', 'minimum', 'maximum', 'minimum']);
  });

  it.each([
    ['C1CCCCC1', [0, 1, 2, 3], 15, 'bad-torsion'],
    ['CC#CC', [0, 1, 2, 3], 15, 'bad-torsion'],
    ['CCCC', [0, 1, 2, 2], 15, 'bad-torsion'],
    ['CCCC', [0, 1, 2, 99], 15, 'bad-torsion'],
    ['CCCC', [0, 1, 2, 3], 7, 'bad-setting'],
    ['CCCC', [0, 1, 2, 3], 0, 'bad-setting'],
    ['CCCC', [0, 1, 2, 3], NaN, 'bad-setting'],
  ] satisfies [string, TorsionAtoms, number, string][])(
    'refuses %s %j with step %d',
    async (smiles, torsion, step, code) => {
      const refusal = await scan(smiles, torsion, { step }).catch((error: unknown) => error);
      expect(refusal).toBeInstanceOf(InputError);
      expect(refusal).toMatchObject({ code });
    },
  );
});

/** A clock that goes on by a millisecond each time it is read: no test waits for real time. */
function countingClock(options: Partial<ControlOptions>): ControlOptions {
  let time = 0;
  return { now: () => time++, breathe: () => Promise.resolve(), ...options };
}

describe('a scan under control', () => {
  const field = fieldOf('CC(=O)Nc1ccccc1OC');
  const options = { ...defaultScanOptions, torsion: [1, 3, 4, 9] as const };

  it('ends with the reason of its signal', async () => {
    const abort = new AbortController();
    let pauses = 0;
    const control = createControl(
      countingClock({
        signal: abort.signal,
        breathe: async () => {
          if (++pauses === 20) abort.abort(new Error('no longer wanted'));
        },
      }),
    );
    await expect(scanTorsion(field, options, control)).rejects.toThrow('no longer wanted');
    expect(pauses).toBe(20);
  });

  it('returns what it has when its time is over, and says so', async () => {
    const whole = await scanTorsion(field, options, unattended);
    expect(whole.complete).toBe(true);
    expect(whole.points).toHaveLength(24);
    const partial = await scanTorsion(field, options, createControl(countingClock({ budget: 1 })));
    expect(partial.complete).toBe(false);
    expect(partial.points.length).toBeGreaterThan(0);
    expect(partial.points.length).toBeLessThan(24);
    expect(partial.stationary.length).toBeGreaterThan(0);
  });

  it('tells how far it is, never backwards', async () => {
    const told: number[] = [];
    const report = (fraction: number): void => void told.push(fraction);
    await scanTorsion(field, options, createControl(countingClock({ report })));
    expect(told.length).toBeGreaterThan(3);
    expect([...told].sort((a, b) => a - b)).toEqual(told);
  });
});
