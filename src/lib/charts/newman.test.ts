import { describe, expect, it } from 'vitest';
import { rotateAbout, torsion } from '$lib/engine/light';
import { newmanView } from './newman';

/** Ideal ethane with its bond along z: C1 in front, hydrogens 2, 3, 4 on it and 5, 6, 7 behind; Å. */
function ethane(turn: number): Float64Array {
  const [rise, reach] = [0.363, 1.028];
  const at = (degrees: number, z: number): number[] => {
    const radians = (degrees * Math.PI) / 180;
    return [reach * Math.cos(radians), reach * Math.sin(radians), z];
  };
  const x = Float64Array.from([
    ...[0, 0, 0, 0, 0, 1.53],
    ...[...at(0, -rise), ...at(120, -rise), ...at(240, -rise)],
    ...[...at(0, 1.53 + rise), ...at(120, 1.53 + rise), ...at(240, 1.53 + rise)],
  ]);
  rotateAbout(x, [5, 6, 7], 0, 1, turn);
  return x;
}
const own = [2, 0, 1, 5] as const;
const neighbors = [[1, 2, 3, 4], [0, 5, 6, 7], [0], [0], [0], [1], [1], [1]];
const azimuths = (spokes: readonly { atom: number; azimuth: number }[]) =>
  spokes.map(({ azimuth }) => Math.round(azimuth * 1000) / 1000 || 0);

describe('Newman projection', () => {
  it('puts the front substituent at the top and the rear one at the torsion angle', () => {
    for (const angle of [-170, -60, 0, 33.3, 60, 180]) {
      const x = ethane(angle);
      const { front, rear } = newmanView(x, own, neighbors);
      expect(azimuths(front)[0]).toBe(0);
      expect(rear[0].azimuth).toBeCloseTo(torsion(x, ...own), 9);
      expect(torsion(x, ...own)).toBeCloseTo(angle, 9);
    }
  });

  // IUPAC (Pure Appl. Chem. 1996, 68, 2193): looking from the front, positive is clockwise from front to rear.
  it('turns clockwise for the eye of one who looks from front to rear', () => {
    const x = ethane(60);
    const { rear } = newmanView(x, own, neighbors);
    // The eye stands below the origin and looks up z; the front substituent points along x, which is its "up". Its right
    // hand is then z × x = y.
    expect(x[3 * 5 + 1]).toBeGreaterThan(0);
    expect(rear[0].azimuth).toBeCloseTo(60, 9);
  });

  it('shows all substituents at their true angles and lengths', () => {
    const { front, rear } = newmanView(ethane(60), own, neighbors);
    expect(azimuths(front)).toEqual([0, 120, -120]);
    expect(azimuths(rear)).toEqual([60, 180, -60]);
    expect(front.concat(rear).map(({ length }) => length.toFixed(3))).toEqual(
      Array(6).fill('1.028'),
    );
    expect([...front, ...rear].filter((spoke) => spoke.own).map(({ atom }) => atom)).toEqual([
      2, 5,
    ]);
  });

  it('does not depend on where the molecule lies', () => {
    const x = ethane(-75);
    const moved = Float64Array.from(x, (_value, n) => {
      const [a, b, c] = x.slice(n - (n % 3), n - (n % 3) + 3);
      return [b + 4, c - 2, a + 1][n % 3];
    });
    const before = newmanView(x, own, neighbors);
    const after = newmanView(moved, own, neighbors);
    expect(azimuths(after.front)).toEqual(azimuths(before.front));
    expect(azimuths(after.rear)).toEqual(azimuths(before.rear));
  });
});
