import { describe, expect, it } from 'vitest';
import { readOpinion, type Opinion } from './opinion-reading';
import { listed, opinionSentence } from './opinion-sentences';

const grid = Array.from({ length: 24 }, (_, n) => -165 + 15 * n);
/** s-trans at 180 and s-cis at 0, this much higher, with barriers near 90 degrees. */
const twofold = (barrier: number, cis: number) =>
  grid.map((angle) => {
    const phi = (angle * Math.PI) / 180;
    return (barrier / 2) * (1 - Math.cos(2 * phi)) + (cis / 2) * (1 + Math.cos(phi));
  });
const scan = {
  model: 'MMFF94s',
  symmetry: { mirror: true },
  points: grid.map((angle, n) => ({ angle, relative: twofold(5, 3)[n] })),
  stationary: [
    {
      kind: 'maximum' as const,
      angle: -90,
      relative: 6.5,
      label: 'perpendicular',
      converged: true,
    },
    { kind: 'minimum' as const, angle: 0, relative: 3, label: 's-cis', converged: true },
    { kind: 'maximum' as const, angle: 90, relative: 6.5, label: 'perpendicular', converged: true },
    { kind: 'minimum' as const, angle: 180, relative: 0, label: 's-trans', converged: true },
  ],
};
const opinion = (...energies: [number, number][]): Opinion => ({
  depth: 'relaxed',
  curves: energies.map(([barrier, cis], n) => ({
    model: ['GFN2-xTB', 'GFN1-xTB'][n],
    energies: twofold(barrier, cis).map((energy) => energy - 6000),
  })),
  gaps: [],
});
const sentence = (given: Opinion) =>
  opinionSentence('C2–C3', readOpinion(scan, given, 298.15), 'kcal/mol');

describe('a second opinion in words', () => {
  it('says that the models agree, and what their mean is', () => {
    const text = sentence(opinion([5.2, 3.1], [4.9, 2.9]));
    expect(text).toMatch(/^The models agree about C2–C3 within 1[.]0 kcal\/mol[.]/);
    expect(text).toMatch(
      /C2–C3 by the mean of MMFF94s, GFN2-xTB and GFN1-xTB: s-trans \(180°\) is preferred by 3[.]0/,
    );
  });

  it('says a disagreement on the barrier first, with the models and their numbers', () => {
    expect(sentence(opinion([9, 3], [5, 3]))).toMatch(
      /^The models disagree about C2–C3: 6[.]\d to turn by \S+, 10[.]\d kcal\/mol by GFN2-xTB[.]/,
    );
  });

  it('says a disagreement on the preferred form before that on the barrier', () => {
    const text = sentence(opinion([9, -2], [5, 3]));
    expect(text).toMatch(
      /^The models disagree about C2–C3: MMFF94s prefers s-trans \(180°\), GFN2-xTB prefers s-cis \(0°\); /,
    );
  });

  it('makes nothing of another preferred form where the two hardly differ', () => {
    const near = {
      ...scan,
      points: grid.map((angle, n) => ({ angle, relative: twofold(5, 0.3)[n] })),
    };
    const stationary = scan.stationary.map((point) =>
      point.label === 's-cis' ? { ...point, relative: 0.3 } : point,
    );
    const reading = readOpinion({ ...near, stationary }, opinion([5, -0.3], [5, 0.2]), 298.15);
    expect(reading.disagreements.filter(({ about }) => about === 'form')).toEqual([]);
  });

  it('marks a quick look as rough', () => {
    const quick: Opinion = { ...opinion([5, 3]), depth: 'quick' };
    expect(sentence(quick)).toContain(
      'GFN2-xTB energies on MMFF94s geometries (a quick look, rough)',
    );
  });

  it('says how many points are missing', () => {
    const whole = opinion([5, 3], [5, 3]);
    const [gfn2, gfn1] = whole.curves;
    const gappy = {
      ...whole,
      curves: [{ ...gfn2, energies: gfn2.energies.map((e, n) => (n === 3 ? null : e)) }, gfn1],
      gaps: [{ angle: -120, model: 'GFN2-xTB', reason: 'the geometry did not converge' }],
    };
    expect(sentence(gappy)).toContain('One point is missing');
  });

  it('lists names as people do', () => {
    expect([listed(['a']), listed(['a', 'b']), listed(['a', 'b', 'c'])]).toEqual([
      'a',
      'a and b',
      'a, b and c',
    ]);
  });
});
