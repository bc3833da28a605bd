import { describe, expect, it } from 'vitest';
import {
  betterPick,
  compareProfiles,
  comparisonQuery,
  layCurve,
  readComparison,
  type ComparedProfile,
} from './comparison';

const id = (n: number) => `${n}${n}${n}${n}${n}${n}${n}${n}-1111-4111-8111-111111111111`;

/** A made-up profile of three unequal minima, turned by `phase` degrees and mirrored on request. */
function profile(n: number, phase = 0, sign = 1): ComparedProfile {
  const energy = (angle: number) => {
    const x = ((sign * angle - phase) * Math.PI) / 180;
    return 1.5 * (1 + Math.cos(3 * x)) + 0.6 * (1 - Math.cos(x)) + 0.3 * (1 + Math.sin(x));
  };
  const angles = Array.from({ length: 72 }, (_, k) => -175 + 5 * k);
  const raw = angles.map((angle) => ({ angle, relative: energy(angle) }));
  const floor = Math.min(...raw.map(({ relative }) => relative));
  const points = raw.map(({ angle, relative }) => ({ angle, relative: relative - floor }));
  const at = (k: number) => points[(k + 72) % 72].relative;
  const stationary = points.flatMap(({ angle, relative }, k): ComparedProfile['stationary'] =>
    relative < at(k - 1) && relative < at(k + 1)
      ? [{ kind: 'minimum', angle, relative, label: relative < 0.01 ? 'low' : 'high' }]
      : relative > at(k - 1) && relative > at(k + 1)
        ? [{ kind: 'maximum', angle, relative, label: '' }]
        : [],
  );
  const names = { moleculeId: id(9), molecule: `m${n}`, bond: 'C2–C3', bondKind: 'C–C' };
  const zero = { zero: 'C1 and C4', zeroElements: 'C C', model: 'MMFF94s' };
  return {
    id: id(n),
    ...names,
    ...zero,
    relaxed: true,
    complete: true,
    points,
    stationary,
    mirror: false,
  };
}

const view = (picks: string[]) =>
  readComparison(new URLSearchParams(picks.map((pick) => ['p', pick])));

describe('the address of a comparison', () => {
  it('reads what it writes', () => {
    const query = `p=${id(1)}&p=${id(2)}.m.120&temperature=350&unit=kJ%2Fmol&angle=-30`;
    expect(comparisonQuery(readComparison(new URLSearchParams(query)))).toBe(query);
  });

  it('leaves out what is odd, given twice or too much', () => {
    const many = Array.from(
      { length: 20 },
      (_, n) => `${10_000_000 + n}-1111-4111-8111-111111111111`,
    );
    expect(view(['x', id(1), `${id(1)}.m`, `${id(2)}.m.9999`, ...many]).picks).toHaveLength(8);
    expect(readComparison(new URLSearchParams('temperature=-5&unit=eV&angle=x'))).toEqual({
      picks: [],
      temperature: 298.15,
      unit: 'kcal/mol',
      angle: 0,
    });
  });
});

describe('laying profiles over one another', () => {
  it('brings a mirrored and turned profile back onto the first', () => {
    const first = profile(1);
    const turned = profile(2, 120);
    const mirrored = profile(3, 0, -1);
    const picks = [id(1), `${id(2)}.-120`, `${id(3)}.m`];
    const rows = compareProfiles([first, turned, mirrored], view(picks));
    for (const { distance } of rows) expect(distance).toBeLessThan(1e-6);
    expect(new Set(rows.map(({ preferred }) => preferred!.angle)).size).toBe(1);
    const plain = compareProfiles([first, turned, mirrored], view([id(1), id(2), id(3)]));
    expect(plain[1].distance).toBeGreaterThan(0.3);
    expect(plain[0].distance).toBe(0);
  });

  it('finds the way itself, and only where it is clearly better', () => {
    const first = layCurve(profile(1), { profile: id(1), mirrored: false, shift: 0 });
    const [pick] = view([id(2)]).picks;
    expect(betterPick(first, profile(2, 120), pick)).toEqual({ ...pick, shift: -120 });
    expect(betterPick(first, profile(2, 60, -1), pick)).toEqual({
      ...pick,
      mirrored: true,
      shift: -60,
    });
    expect(betterPick(first, profile(2), pick)).toBeNull();
  });

  it('reads energies at the chosen angle and populations at the temperature', () => {
    const one = profile(1);
    const chosen = one.points[10];
    const [cold] = compareProfiles([one], {
      ...view([id(1)]),
      angle: chosen.angle,
      temperature: 150,
    });
    expect(cold.energy).toBeCloseTo(chosen.relative, 6);
    const [hot] = compareProfiles([one], { ...view([id(1)]), temperature: 900 });
    expect(cold.population!).toBeGreaterThan(hot.population!);
    expect(hot.population!).toBeGreaterThan(1 / 3);
    const heights = one.stationary.map(({ relative }) => relative);
    const climbs = heights.map((height, k) => height - heights[(k + 1) % heights.length]);
    expect(cold.barrier).toBeCloseTo(Math.max(...climbs.map(Math.abs)), 6);
  });
});
