import { setImmediate } from 'node:timers/promises';
import { describe, expect, expectTypeOf, it } from 'vitest';
import type { ComputeRequest } from '$lib/domain/compute';
import { computeRequestSchema } from '$lib/domain/compute';
import type { ControlOptions } from './control';
import { InputError } from './errors';
import { perform } from './run';
import type { Request } from './tasks/request';
import type { Result } from './tasks/result';

const clock: ControlOptions = {
  now: () => performance.now(),
  breathe: async () => {
    await setImmediate();
  },
};

function ask(
  molecule: { smiles: string } | { molfile: string },
  task: { kind: string } & Record<string, unknown>,
  options: Partial<ControlOptions> = {},
): Promise<Result> {
  return perform(computeRequestSchema.parse({ molecule, task }), { ...clock, ...options });
}

/** A result without what may differ between two runs. */
function numbersOf({ provenance, ...rest }: Result) {
  const { seconds, ...same } = provenance;
  expect(seconds).toBeGreaterThanOrEqual(0);
  return { ...rest, provenance: same };
}

const ibuprofen = { smiles: 'CC(C)Cc1ccc(cc1)C(C)C(=O)O' };
/** Long work on a drug-sized molecule: far more than the time the tests below give it. */
const longMolecule = { smiles: 'CCOC(=O)CCNC(=O)C(Cc1ccccc1)NC(=O)CCCc1ccc(OC)cc1' };

async function longGeometry(): Promise<{ molfile: string }> {
  const { molfile } = await ask(longMolecule, { kind: 'minimize' });
  return { molfile };
}

it('takes what the domain parses', () => {
  expectTypeOf<ComputeRequest>().toExtend<Request>();
  expect(computeRequestSchema).toBeDefined();
});

describe('the same request', () => {
  it.each([
    ['conformers', ibuprofen, { kind: 'conformers', effort: 'quick', limit: 5 }],
    ['a scan', { smiles: 'CCC(=O)OC' }, { kind: 'scan', bond: [1, 2] }],
    ['conjugation', { smiles: 'C=CC(=O)OC' }, { kind: 'conjugation' }],
    ['energy', ibuprofen, { kind: 'energy' }],
  ])('gives the same numbers after other work: %s', async (_what, molecule, task) => {
    const first = numbersOf(await ask(molecule, task));
    await ask({ smiles: 'CC(=O)Nc1ccccc1O' }, { kind: 'conformers', effort: 'quick', seed: 7 });
    expect(numbersOf(await ask(molecule, task))).toEqual(first);
  });

  it('gives the same strain', async () => {
    const { molfile } = await ask({ smiles: 'OCCc1ccccc1' }, { kind: 'minimize' });
    const first = numbersOf(await ask({ molfile }, { kind: 'strain' }));
    await ask(ibuprofen, { kind: 'energy' });
    expect(numbersOf(await ask({ molfile }, { kind: 'strain' }))).toEqual(first);
  });
});

describe('long work', async () => {
  const given = await longGeometry();
  const longTasks: [string, { kind: string } & Record<string, unknown>][] = [
    ['conformers', { kind: 'conformers' }],
    ['scan', { kind: 'scan', bond: [5, 6] }],
    ['conjugation', { kind: 'conjugation' }],
    ['strain', { kind: 'strain' }],
  ];

  it.each(longTasks)('ends soon after it is aborted: %s', async (_kind, task) => {
    const abort = new AbortController();
    let reports = 0;
    const report = (): void => {
      reports++;
      if (reports === 2) abort.abort(new Error('not wanted any more'));
    };
    // Rejecting at all is the proof: each of these would otherwise go on for many seconds and resolve.
    await expect(ask(given, task, { report, signal: abort.signal })).rejects.toThrow(
      'not wanted any more',
    );
    expect(reports).toBe(2);
  });

  it.each(longTasks)('ends with what it has when its time is over: %s', async (_kind, task) => {
    const result = await ask(given, task, { budget: 1000 });
    expect(result).toMatchObject({ complete: false });
    expect(result.warnings.map(({ code }) => code)).toContain('incomplete-search');
  });

  it('reports fractions that only rise, up to 1', async () => {
    const fractions: number[] = [];
    // A clock in which every look takes a while, so that reports come however fast the machine is.
    let time = 0;
    const now = (): number => (time += 5);
    const report = (fraction: number): number => fractions.push(fraction);
    await ask({ smiles: 'CCCCO' }, { kind: 'conjugation' }, { report, now });
    await ask({ smiles: 'CCC=O' }, { kind: 'conformers', effort: 'quick' }, { report: undefined });
    expect(fractions.length).toBeGreaterThan(1);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    expect(fractions.at(-1)).toBe(1);
  });

  it('does not begin when it is aborted already', async () => {
    await expect(
      ask(ibuprofen, { kind: 'energy' }, { signal: AbortSignal.abort(new Error('too late')) }),
    ).rejects.toThrow('too late');
  });
});

describe('a geometry', () => {
  it('that is missing is built, and a warning says so', async () => {
    const { warnings } = await ask(ibuprofen, { kind: 'energy' });
    expect(warnings.map(({ code }) => code)).toContain('geometry-built');
  });

  it('that is given is evaluated as it is', async () => {
    const minimum = await ask({ smiles: 'CCO' }, { kind: 'minimize' });
    const stretched = minimum.molfile.replace(/^( *-?\d+\.\d{4})/m, (x) =>
      (Number(x) + 0.2).toFixed(4).padStart(10),
    );
    const result = await ask({ molfile: stretched }, { kind: 'energy' });
    expect(result).toMatchObject({
      molfile: expect.stringContaining(stretched.split('\n')[4].slice(0, 30)) as string,
    });
    expect((result as Result<'energy'>).gradientRms).toBeGreaterThan(1);
    expect(result.warnings).toEqual([]);
  });
});

it('scans a chiral allene, whose stereocenter has two neighbors only', async () => {
  const scan = (await ask({ smiles: 'CC=C=CC' }, { kind: 'scan', bond: [0, 1] })) as Result<'scan'>;
  expect(scan.symmetry.period).toBe(120);
  expect(scan.warnings.map(({ code }) => code)).toContain('undefined-stereocenter');
});

it('takes a carbanion as it comes, flat or pyramidal', async () => {
  const anion = { smiles: 'O=C1[C-](OC([N-]1)=O)c1ccccc1' };
  const result = await ask(anion, { kind: 'conformers', effort: 'quick' });
  expect(result).toMatchObject({ complete: true, warnings: [] });
});

it('refuses a strain without a geometry as something a person can mend', async () => {
  await expect(ask(ibuprofen, { kind: 'strain' })).rejects.toThrow(InputError);
});

it('writes the version it is given', async () => {
  const request = computeRequestSchema.parse({ molecule: ibuprofen, task: { kind: 'energy' } });
  const { provenance } = await perform(request, { ...clock, version: '9.9.9' });
  expect(provenance.version).toBe('9.9.9');
});
