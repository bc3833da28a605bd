import { describe, expect, it } from 'vitest';
import { computeRequestSchema, describeRequestError } from './compute';

const ethane = { smiles: 'CC' };

function parsed(task: Record<string, unknown>) {
  return computeRequestSchema.parse({ molecule: ethane, task }).task;
}

function refusal(request: unknown): string {
  const result = computeRequestSchema.safeParse(request);
  if (result.success) throw new Error('the request was accepted');
  return describeRequestError(result.error);
}

describe('the defaults of a request', () => {
  const vacuum = { constant: 1, distanceDependent: false };
  const model = { variant: 'MMFF94s', dielectric: vacuum };
  it.each([
    [{ kind: 'energy' }, model],
    [{ kind: 'minimize' }, model],
    [
      { kind: 'conformers' },
      { ...model, limit: 50, window: 10, temperature: 298.15, seed: 1, effort: 'normal' },
    ],
    [
      { kind: 'scan', bond: [0, 1] },
      { ...model, step: 15, relaxed: true, temperature: 298.15, seed: 1 },
    ],
    [{ kind: 'conjugation' }, { ...model, temperature: 298.15, seed: 1 }],
    [
      { kind: 'strain' },
      {
        variant: 'MMFF94s',
        dielectric: { constant: 4, distanceDependent: true },
        tether: 0.3,
        seed: 1,
      },
    ],
  ])('fills in %o', (task, defaults) => {
    expect(parsed(task)).toEqual({ ...task, ...defaults });
  });

  it('fills in the missing half of a dielectric', () => {
    expect(parsed({ kind: 'energy', dielectric: { distanceDependent: true } })).toMatchObject({
      dielectric: { constant: 1, distanceDependent: true },
    });
  });
});

describe('a refused request', () => {
  it.each([
    ['no object', [], 'must be an object'],
    ['null', null, 'must be an object'],
    ['no molecule', { task: { kind: 'energy' } }, 'molecule: The molecule must be'],
    [
      'two molecules at once',
      { molecule: { smiles: 'C', molfile: '' }, task: { kind: 'energy' } },
      'molecule: The molecule must be',
    ],
    ['an unknown task', { molecule: ethane, task: { kind: 'dock' } }, 'energy, minimize'],
    ['a task that is text', { molecule: ethane, task: 'energy' }, 'energy, minimize'],
    [
      'an unknown setting',
      { molecule: ethane, task: { kind: 'conformers', windwo: 3 } },
      'no field "windwo"',
    ],
    [
      'a scan without a bond',
      { molecule: ethane, task: { kind: 'scan' } },
      'either "torsion" [i, j, k, l] or "bond" [j, k]',
    ],
    [
      'a scan with both',
      { molecule: ethane, task: { kind: 'scan', bond: [0, 1], torsion: [2, 0, 1, 5] } },
      'either "torsion" [i, j, k, l] or "bond" [j, k]',
    ],
    [
      'a torsion that names an atom twice',
      { molecule: ethane, task: { kind: 'scan', torsion: [0, 1, 0, 2] } },
      'four different atom indices',
    ],
    [
      'a step that misses 360',
      { molecule: ethane, task: { kind: 'scan', bond: [0, 1], step: 7 } },
      'divide 360',
    ],
    [
      'a step of zero',
      { molecule: ethane, task: { kind: 'scan', bond: [0, 1], step: 0 } },
      'divide 360',
    ],
    [
      'a temperature below zero',
      { molecule: ethane, task: { kind: 'conjugation', temperature: -1 } },
      'The temperature must be a number from 10 to 3000 K.',
    ],
    [
      'a number as text',
      { molecule: ethane, task: { kind: 'strain', tether: '0.3' } },
      'The tether must be a number from 0 to 2 Å.',
    ],
    [
      'a misspelled dielectric',
      { molecule: ethane, task: { kind: 'energy', dielectric: { eps: 4 } } },
      'The dielectric has no field "eps"',
    ],
  ])('says what is wrong with %s', (_what, request, sentence) => {
    expect(refusal(request)).toContain(sentence);
  });

  it('names at most three faults', () => {
    const task = { kind: 'conformers', limit: 0, window: -1, seed: 0.5, effort: 'huge' };
    expect(refusal({ molecule: ethane, task }).match(/must be/g)).toHaveLength(3);
  });
});
