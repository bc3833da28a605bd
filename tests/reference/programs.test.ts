/** xtb and mopac through Windlass against the same programs called by hand; skipped where they are not installed. */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setImmediate } from 'node:timers/promises';
import { describe, expect, it } from 'vitest';
import { ELEMENT_SYMBOLS, perform, readMolecule } from '$lib/engine';
import { coordinatesOf } from '$lib/domain/molfile-geometry';
import { torsion } from '$lib/engine/geometry';
import { describeMolecule } from '../../worker/programs/describe-molecule';
import { findProgram } from '../../worker/programs/find-programs';
import { relaxByPm7 } from '../../worker/programs/mopac';
import {
  isGap,
  KCAL_PER_HARTREE,
  type InstalledProgram,
  type ProgramMolecule,
} from '../../worker/programs/program';
import { relax, singlePoint } from '../../worker/programs/xtb';
import { hasMopac, hasXtb, MOPAC, XTB } from '../support/programs';

const limits = { seconds: 60, signal: new AbortController().signal };

async function found(name: 'xtb' | 'mopac', path: string): Promise<InstalledProgram> {
  const program = await findProgram(name, path);
  if ('missing' in program) throw new Error(program.missing);
  return program;
}

/** The MMFF94s minimum of a molecule. */
async function minimum(smiles: string) {
  const molecule = readMolecule({ smiles });
  const { molfile } = await perform(
    {
      molecule: { smiles },
      task: {
        kind: 'minimize',
        variant: 'MMFF94s',
        dielectric: { constant: 1, distanceDependent: false },
      },
    },
    { now: () => performance.now(), breathe: () => setImmediate() },
  );
  return { molecule: describeMolecule(molecule, ELEMENT_SYMBOLS), x: coordinatesOf(molfile) };
}

/** Runs a program as a person would, in a folder with one file, and returns what it printed and another file. */
function byHand(path: string, args: string[], file: [string, string], reads: string): string {
  const folder = mkdtempSync(join(tmpdir(), 'by-hand-'));
  try {
    writeFileSync(join(folder, file[0]), file[1]);
    const env = { ...process.env, OMP_NUM_THREADS: '1' };
    const { stdout } = spawnSync(path, args, { cwd: folder, env, encoding: 'utf8' });
    return reads === '' ? stdout : readFileSync(join(folder, reads), 'utf8');
  } finally {
    rmSync(folder, { recursive: true });
  }
}

const atomLines = ({ symbols }: ProgramMolecule, x: Float64Array, mark: string) =>
  symbols
    .map((symbol, a) => `${symbol} ${[0, 1, 2].map((k) => `${x[3 * a + k]}${mark}`).join(' ')}`)
    .join('\n');

function energyByHand(args: string[], molecule: ProgramMolecule, x: Float64Array): number {
  const xyz = `${molecule.symbols.length}\nby hand\n${atomLines(molecule, x, '')}\n`;
  const printed = byHand(XTB, ['in.xyz', ...args], ['in.xyz', xyz], '');
  return Number(/TOTAL ENERGY\s+(-\d+\.\d+)/.exec(printed)![1]) * KCAL_PER_HARTREE;
}

describe.skipIf(!hasXtb)('xtb', () => {
  it('gives the energies that it prints when called by hand', { timeout: 60_000 }, async () => {
    const xtb = await found('xtb', XTB);
    for (const smiles of ['C=CC=C', 'C[NH2+]CCO', 'CC([O-])=O']) {
      const { molecule, x } = await minimum(smiles);
      const charge = ['--chrg', String(molecule.charge)];
      for (const gfn of [1, 2] as const) {
        const point = await singlePoint(xtb, molecule, x, gfn, limits);
        const expected = energyByHand(['--gfn', String(gfn), ...charge], molecule, x);
        expect(isGap(point) ? point.gap : Math.abs(point.energy - expected)).toBeLessThan(0.0001);
      }
    }
  });

  it(
    'holds a torsion where it was told to, and reports no energy of the constraint',
    { timeout: 60_000 },
    async () => {
      const xtb = await found('xtb', XTB);
      const { molecule, x } = await minimum('C=CC=C');
      for (const angle of [-180, -60, 0, 45, 90]) {
        const point = await relax(xtb, molecule, x, { atoms: [0, 1, 2, 3], angle }, limits);
        if (isGap(point)) throw new Error(point.gap);
        const off = Math.abs(torsion(point.coordinates, 0, 1, 2, 3) - angle) % 360;
        expect(Math.min(off, 360 - off)).toBeLessThan(0.1);
        const again = await singlePoint(xtb, molecule, point.coordinates, 2, limits);
        expect(again).toEqual({ energy: point.energy, coordinates: point.coordinates });
      }
    },
  );

  it(
    'that does not converge, or makes another molecule, gives a reason and no number',
    { timeout: 60_000 },
    async () => {
      const xtb = await found('xtb', XTB);
      const { molecule, x } = await minimum('CCCC');
      const collapsed = x.map((value) => value * 0.01);
      expect(await singlePoint(xtb, molecule, collapsed, 2, limits)).toHaveProperty('gap');
      const stretched = x.map((value, n) => (n === 0 ? value + 4 : value));
      expect(await relax(xtb, molecule, stretched, null, limits)).toHaveProperty('gap');
    },
  );
});

describe.skipIf(!hasMopac)('mopac', () => {
  it(
    'gives the heat of formation that it prints when called by hand',
    { timeout: 60_000 },
    async () => {
      const mopac = await found('mopac', MOPAC);
      for (const smiles of ['C=CC=C', 'CC([O-])=O']) {
        const { molecule, x } = await minimum(smiles);
        const point = await relaxByPm7(mopac, molecule, x, limits);
        const deck = `PM7 PRECISE GNORM=0.05 XYZ CHARGE=${molecule.charge}\n\n\n${atomLines(molecule, x, ' 1')}\n`;
        const printed = byHand(MOPAC, ['in.mop'], ['in.mop', deck], 'in.out');
        const expected = Number(/FINAL HEAT OF FORMATION =\s+(-?\d+\.\d+)/.exec(printed)![1]);
        expect(isGap(point) ? point.gap : Math.abs(point.energy - expected)).toBeLessThan(0.005);
      }
    },
  );
});
