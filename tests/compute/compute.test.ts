/** The command as people run it: a child process, JSON in, JSON out, exit codes. */
import { spawn } from 'node:child_process';
import { describe, expect, it } from 'vitest';

interface Run {
  readonly exitCode: number | null;
  readonly results: Record<string, unknown>[];
}

async function run(input: string, ...args: string[]): Promise<Run> {
  const child = spawn('npm', ['run', '--silent', 'compute', '--', ...args], {
    stdio: ['pipe', 'pipe', 'inherit'],
  });
  child.stdin.end(input);
  const chunks: Buffer[] = [];
  child.stdout.on('data', (chunk: Buffer) => chunks.push(chunk));
  const exitCode = await new Promise<number | null>((resolve) => child.on('close', resolve));
  const lines = Buffer.concat(chunks).toString('utf8').split('\n');
  // Every result is one line and ends with one.
  expect(lines.pop()).toBe('');
  return { exitCode, results: lines.map((line) => JSON.parse(line) as Record<string, unknown>) };
}

const butadiene = { smiles: 'C=CC=C' };
const butane = { smiles: 'CCCC' };

function lines(...requests: unknown[]): string {
  return requests.map((request) => `${JSON.stringify(request)}\n`).join('');
}

const molfile = expect.stringMatching(/V2000[\s\S]*M {2}END/) as string;
const number = expect.any(Number) as number;

describe('one result a line for every kind of task', async () => {
  const { exitCode, results } = await run(
    lines(
      { molecule: butadiene, task: { kind: 'energy' } },
      { molecule: butadiene, task: { kind: 'minimize' } },
      { molecule: butane, task: { kind: 'conformers' } },
      { molecule: butane, task: { kind: 'scan', bond: [1, 2] } },
      { molecule: butadiene, task: { kind: 'conjugation' } },
    ),
    '--lines',
  );
  const [energy, minimum, conformers, scan, conjugation] = results;

  it('succeeds', () => {
    expect(exitCode).toBe(0);
    expect(results).toHaveLength(5);
  });

  it('carries molecule, warnings and provenance with the defaults filled in', () => {
    for (const result of results) {
      expect(result).toMatchObject({
        molfile,
        warnings: expect.any(Array) as unknown,
        provenance: {
          version: expect.stringMatching(/^\d+\.\d+\.\d+$/) as string,
          model: 'MMFF94s',
          settings: { dielectric: { constant: 1, distanceDependent: false } },
          seconds: number,
        },
      });
    }
    expect(scan.provenance).toMatchObject({ settings: { step: 15, relaxed: true, seed: 1 } });
  });

  it('energy: terms that sum up, one type and charge an atom', () => {
    const { terms, atomTypes, charges } = energy as {
      terms: Record<string, number>;
      atomTypes: number[];
      charges: number[];
    };
    expect(Object.keys(terms).sort()).toEqual([
      'angle',
      'bond',
      'electrostatic',
      'outOfPlane',
      'stretchBend',
      'torsion',
      'vanDerWaals',
    ]);
    const sum = Object.values(terms).reduce((total, term) => total + term, 0);
    expect(energy.energy).toBeCloseTo(sum, 8);
    // MMFF94 part I, table III: vinylic carbon 2, hydrogen on carbon 5.
    expect(atomTypes).toEqual([2, 2, 2, 2, 5, 5, 5, 5, 5, 5]);
    expect(charges.reduce((total, charge) => total + charge, 0)).toBeCloseTo(0, 10);
    expect(energy.gradientRms).toBeLessThanOrEqual(0.001);
  });

  it('minimize: a converged minimum', () => {
    expect(minimum).toMatchObject({ converged: true, evaluations: number, energy: number });
    expect(minimum.gradientRms).toBeLessThanOrEqual(0.001);
  });

  it('conformers: anti and gauche butane', () => {
    // Common practice, no source: anti once, gauche twice, 0.78 kcal/mol above it in MMFF94s.
    expect(conformers).toMatchObject({
      conformers: [
        { relative: 0, degeneracy: 1, energy: number, population: number, molfile },
        { relative: expect.closeTo(0.78, 2) as number, degeneracy: 2, molfile },
      ],
      complete: true,
    });
  });

  it('scan: the whole circle and its stationary points', () => {
    const { points, stationary } = scan as {
      points: { angle: number; relative: number }[];
      stationary: { kind: string; label: string; relative: number }[];
    };
    expect(scan.torsion).toEqual([0, 1, 2, 3]);
    expect(points.map(({ angle }) => angle)).toEqual(
      Array.from({ length: 24 }, (_, n) => -165 + 15 * n),
    );
    expect(points[23]).toMatchObject({ angle: 180, relative: 0, energy: number, molfile });
    expect(stationary.filter(({ kind }) => kind === 'minimum').map(({ label }) => label)).toEqual(
      expect.arrayContaining(['anti', 'gauche', 'gauche']),
    );
    // MMFF94s with RDKit 2022.09.3: 3.96 between anti and gauche, 5.21 between the gauche forms.
    const maxima = stationary.filter(({ kind }) => kind === 'maximum');
    expect(Math.max(...maxima.map(({ relative }) => relative))).toBeCloseTo(5.21, 1);
  });

  it('conjugation: the two forms of butadiene', () => {
    // MMFF94s with RDKit 2022.09.3: gauche 2.47 near 45°, planar s-cis 3.43, barrier 6.18.
    const { bonds } = conjugation as { bonds: Record<string, unknown>[] };
    expect(bonds).toHaveLength(1);
    expect(bonds[0]).toMatchObject({
      bond: [1, 2],
      torsion: [0, 1, 2, 3],
      sCis: { label: 'gauche (skew)', molfile },
      sTrans: { label: 'planar s-trans', molfile },
    });
    expect(bonds[0].difference).toBeCloseTo(2.47, 1);
    expect(bonds[0].planarSCisCost).toBeCloseTo(3.43, 1);
    expect(bonds[0].barrier).toBeCloseTo(6.18, 1);
    expect(bonds[0].sCisFraction).toBeGreaterThan(0);
    expect(bonds[0].meanOverlap).toBeGreaterThan(0.9);
  });

  it('strain: a single request on a geometry; gauche butane costs what it lies above anti', async () => {
    const gauche = (conformers as { conformers: { molfile: string }[] }).conformers[1];
    const request = { molecule: { molfile: gauche.molfile }, task: { kind: 'strain' } };
    const single = await run(JSON.stringify(request));
    expect(single.exitCode).toBe(0);
    expect(single.results).toHaveLength(1);
    const [result] = single.results as {
      strain: number;
      relaxed: number;
      lowest: number;
      torsions: { strain: number }[];
    }[];
    expect(result.strain).toBeCloseTo(0.78, 1);
    expect(result.strain).toBeCloseTo(result.relaxed - result.lowest, 10);
    expect(result.torsions).toMatchObject([
      { bond: [1, 2], angle: number, strain: expect.closeTo(0.78, 1) as number },
    ]);
  });
});

describe('a failed request', () => {
  it('answers every kind of fault with a code and goes on', async () => {
    const { exitCode, results } = await run(
      lines(
        { molecule: { smiles: 'CC(C)(C)(C)C' }, task: { kind: 'energy' } },
        { molecule: { smiles: '' }, task: { kind: 'energy' } },
        { molecule: butane, task: { kind: 'conformers', windwo: 3 } },
        { molecule: butane, task: { kind: 'scan', bond: [0, 2] } },
        { molecule: butane, task: { kind: 'strain' } },
        { molecule: { smiles: 'C' }, task: { kind: 'energy' } },
      ),
      '--lines',
    );
    expect(exitCode).toBe(1);
    expect(results).toMatchObject([
      { error: { code: 'valence', atom: 1, message: expect.any(String) as string } },
      { error: { code: 'empty-input' } },
      { error: { code: 'bad-setting' } },
      { error: { code: 'no-such-bond' } },
      { error: { code: 'missing-geometry' } },
      { energy: number },
    ]);
  });

  it('exits with 2 when a line is no JSON, and answers the others', async () => {
    const good = JSON.stringify({ molecule: { smiles: 'C' }, task: { kind: 'energy' } });
    const { exitCode, results } = await run(`${good}\n{"molecule":\n\n${good}`, '--lines');
    expect(exitCode).toBe(2);
    expect(results).toMatchObject([{ energy: number }, { error: {} }, { energy: number }]);
  });

  it.each([
    ['nothing', ''],
    ['text', 'CCCC'],
    ['half an object', '{"molecule": {'],
  ])('exits with 2 when the input is %s', async (_what, input) => {
    const { exitCode, results } = await run(input);
    expect(exitCode).toBe(2);
    expect(results).toMatchObject([{ error: { message: expect.any(String) as string } }]);
  });
});
