import { describe, expect, it } from 'vitest';
import { fitFourier, fourierValue } from './fourier';

const grid = (step: number) => Array.from({ length: 360 / step }, (_, i) => -180 + step * (i + 1));
const cosine = (angle: number) => Math.cos((angle * Math.PI) / 180);
const sine = (angle: number) => Math.sin((angle * Math.PI) / 180);

describe('fitFourier', () => {
  it('finds the three terms a profile was made of', () => {
    const energy = (angle: number) =>
      0.4 +
      0.75 * (1 + cosine(angle)) +
      1.5 * (1 - cosine(2 * angle)) +
      1.45 * (1 + cosine(3 * angle));
    const angles = grid(15);
    const series = fitFourier(angles, angles.map(energy), true);
    expect(series.constant).toBeCloseTo(0.4, 8);
    [1.5, 3, 2.9, 0, 0, 0].forEach((value, n) => expect(series.cosine[n]).toBeCloseTo(value, 8));
    expect(series.sine).toEqual([0, 0, 0, 0, 0, 0]);
    expect(series.residualRms).toBeLessThan(1e-9);
    expect(fourierValue(series, 37)).toBeCloseTo(energy(37), 8);
  });

  it('needs sine terms for a profile that is not its own mirror image', () => {
    const energy = (angle: number) => 1 + cosine(angle) + 0.35 * sine(2 * angle);
    const angles = grid(15);
    const series = fitFourier(angles, angles.map(energy), false);
    expect(series.sine[1]).toBeCloseTo(0.7, 8);
    expect(series.residualRms).toBeLessThan(1e-9);
    const cosinesOnly = fitFourier(angles, angles.map(energy), true);
    // What is missed is 0.35 sin 2φ, whose root mean square is 0.35/√2.
    expect(cosinesOnly.residualRms).toBeCloseTo(0.35 / Math.SQRT2, 8);
  });

  it('stops at the order its points can carry', () => {
    const angles = grid(60);
    const series = fitFourier(angles, angles.map(cosine), false);
    expect(series.cosine).toHaveLength(2);
    expect(series.cosine[0]).toBeCloseTo(2, 8);
  });

  it('refuses two points', () => {
    expect(() => fitFourier([0, 180], [0, 1], true)).toThrow('three points');
  });
});
