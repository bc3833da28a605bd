import { describe, expect, it } from 'vitest';
import { aboveOwnLowest, consensusOf, readModelCurve, widestSpread } from './model-curves';

const grid = Array.from({ length: 24 }, (_, n) => -165 + 15 * n);
/** Three equal wells at ±60 and 180 with barriers of this height. */
const threefold = (barrier: number) => (angle: number) =>
  (barrier / 2) * (1 + Math.cos((3 * angle * Math.PI) / 180));
const curve = (energyAt: (angle: number) => number | null, model = 'GFN2-xTB') => ({
  model,
  points: grid.map((angle) => ({ angle, energy: energyAt(angle) })),
});
const plain = { stationary: [], symmetry: { mirror: true } };

describe('the curve of another model', () => {
  it('is read for its minima and barriers between the points of the grid', () => {
    // Shifted by 7 degrees, so that no extreme falls on a point; the parabola is within 0.02 of a cosine's crest.
    const shifted = curve((angle) => 100 + threefold(3)(angle - 7));
    const reading = readModelCurve(shifted, plain, 298.15)!;
    expect(reading.forms.flatMap(({ angles }) => angles).toSorted((a, b) => a - b)).toEqual([
      expect.closeTo(-173, 0),
      expect.closeTo(-53, 0),
      expect.closeTo(67, 0),
    ]);
    expect(Math.abs(reading.turn!.barrier - 3)).toBeLessThan(0.05);
  });

  it('takes names from the scan it belongs to, where an extreme of the same kind is near', () => {
    const stationary = [
      { kind: 'minimum' as const, angle: 170, relative: 0, label: 'anti', converged: true },
    ];
    const reading = readModelCurve(curve(threefold(3)), { ...plain, stationary }, 298.15)!;
    expect(reading.forms.find(({ angles }) => angles.includes(180))!.label).toBe('anti');
    expect(reading.forms.find(({ angles }) => !angles.includes(180))!.label).toBe('synclinal');
  });

  it('takes no dent of the optimizer’s noise for a form', () => {
    const dented = curve((angle) => threefold(3)(angle) - (angle === 0 ? 0.04 : 0));
    expect(readModelCurve(dented, plain, 298.15)!.basins).toHaveLength(3);
    const deep = curve((angle) => threefold(3)(angle) - (angle === 0 ? 0.5 : 0));
    expect(readModelCurve(deep, plain, 298.15)!.basins).toHaveLength(4);
  });

  it('is read round its gaps, and not at all with fewer than three points', () => {
    const gappy = curve((angle) => (angle === 15 ? null : threefold(3)(angle)));
    expect(readModelCurve(gappy, plain, 298.15)!.basins).toHaveLength(3);
    const empty = curve((angle) => (angle > 150 ? 1 : null));
    expect(readModelCurve(empty, plain, 298.15)).toBeNull();
  });
});

describe('the mean of models', () => {
  const curves = [
    aboveOwnLowest(curve(threefold(2), 'A')),
    aboveOwnLowest(curve((angle) => (angle === 60 ? null : 50 + threefold(5)(angle)), 'B')),
  ];

  it('is that of the energies above each model’s own lowest, with the models’ range', () => {
    const consensus = consensusOf(curves);
    expect(consensus.models).toEqual(['A', 'B']);
    expect(consensus.points.find(({ angle }) => angle === 0)).toEqual({
      angle: 0,
      mean: expect.closeTo(3.5, 9),
      low: expect.closeTo(2, 9),
      high: expect.closeTo(5, 9),
    });
    expect(widestSpread(consensus)!.spread).toBeCloseTo(3, 9);
  });

  it('has a gap where one of the models has one', () => {
    const at60 = consensusOf(curves).points.find(({ angle }) => angle === 60);
    expect(at60).toEqual({ angle: 60, mean: null, low: null, high: null });
  });
});
