import { describe, expect, it } from 'vitest';
import { contourLines } from './contours';
import { axisAngle, cellAt, refine, type MapEnergies } from './fine-grid';
import { layMap, mapLevels, wayPath } from './map-layout';
import { minimumName } from '../domain/map-way';
import { mapPlot } from './map-plot';

/** A map whose energy is known: 3 + 2 cos a − cos b, kcal/mol; lowest at a = 180, b = 0. */
function known(perAxis: number): MapEnergies {
  const step = 360 / perAxis;
  const cosine = (n: number) => Math.cos((axisAngle({ perAxis, step }, n) * Math.PI) / 180);
  const energies = Array.from(
    { length: perAxis ** 2 },
    (_, cell) => 3 + 2 * cosine(Math.floor(cell / perAxis)) - cosine(cell % perAxis),
  );
  return { perAxis, step, energies };
}

describe('the grid of a map', () => {
  it('finds the nearest cell over the rim', () => {
    const map = known(12);
    for (const cell of [0, 7, 11, 12, 143]) {
      const [first, second] = [Math.floor(cell / 12), cell % 12].map((n) => axisAngle(map, n));
      expect(cellAt(map, first, second)).toBe(cell);
    }
    expect(cellAt(map, -179, 179)).toBe(143);
    expect(cellAt(map, 180, -180)).toBe(143);
  });

  it('is smooth between its cells, goes through them and closes', () => {
    const fine = refine(known(12), 10);
    expect(fine.perAxis).toBe(37);
    for (const [first, second] of [
      [0, 0],
      [90, -120],
      [-150, 60],
    ]) {
      const radians = (angle: number) => (angle * Math.PI) / 180;
      const exact = 3 + 2 * Math.cos(radians(first)) - Math.cos(radians(second));
      expect(fine.at((first + 180) / 10, (second + 180) / 10)).toBeCloseTo(exact, 6);
    }
    expect(fine.at(0, 5)).toBe(fine.at(36, 5));
    expect(fine.at(5, 0)).toBe(fine.at(5, 36));
  });

  it('never falls below or rises above what was computed', () => {
    const map = known(6);
    const fine = refine(map, 4);
    const values = Array.from({ length: fine.perAxis ** 2 }, (_, n) =>
      fine.at(n % fine.perAxis, Math.floor(n / fine.perAxis)),
    );
    const computed = map.energies.flatMap((energy) => energy ?? []);
    expect(Math.min(...values)).toBeGreaterThanOrEqual(Math.min(...computed) - 1e-9);
    expect(Math.max(...values)).toBeLessThanOrEqual(Math.max(...computed) + 1e-9);
  });

  it('takes missing cells for high ones', () => {
    const { energies, ...axes } = known(6);
    const holed = { ...axes, energies: energies.map((energy, n) => (n === 7 ? null : energy)) };
    const fine = refine(holed, 60);
    expect(fine.at(2, 2)).toBeCloseTo(6, 6);
  });
});

describe('contourLines', () => {
  it('go round a cone in one closed line at its distance', () => {
    const field = {
      width: 41,
      height: 41,
      at: (x: number, y: number) => Math.hypot(x - 20, y - 20),
    };
    const lines = contourLines(field, 10);
    expect(lines).toHaveLength(1);
    expect(lines[0][0]).toEqual(lines[0].at(-1));
    for (const [x, y] of lines[0]) {
      // Straight pieces between corners one unit apart.
      expect(Math.abs(Math.hypot(x - 20, y - 20) - 10)).toBeLessThan(0.02);
    }
  });

  it('part the corners of a saddle', () => {
    const field = { width: 2, height: 2, at: (x: number, y: number) => (x === y ? 1 : 0) };
    expect(contourLines(field, 0.4)).toHaveLength(2);
    expect(contourLines(field, 2)).toEqual([]);
  });
});

describe('layMap', () => {
  it('covers the square with bands, without a gap', () => {
    const { bands } = layMap(known(12), 288);
    const area = bands.reduce(
      (sum, { path }) =>
        sum +
        [...path.matchAll(/h([\d.]+)v([\d.]+)/g)].reduce(
          (part, [, width, height]) => part + Number(width) * Number(height),
          0,
        ),
      0,
    );
    expect(area).toBeCloseTo(288 ** 2, 0);
  });

  it('chooses round levels over the lowest nine tenths of the map', () => {
    const levels = mapLevels(known(12));
    // Its energies run from 0 to 6, and a tenth of the cells lies above 5.
    expect(levels).toEqual([1, 2, 3, 4, 5]);
    expect(layMap(known(12), 288).contours.map(({ level }) => level)).toEqual(levels);
  });
});

describe('wayPath', () => {
  it('leaves over one rim and comes in over the other', () => {
    const map = known(12);
    const way = wayPath(map, [cellAt(map, 150, 0), cellAt(map, 180, 0), cellAt(map, -150, 0)], 360);
    expect(way).toBe('M330 180L360 180L390 180M0 180L30 180');
  });
});

describe('mapPlot', () => {
  it('names its axes, levels and minima', () => {
    const plot = mapPlot({
      ...known(12),
      title: 'a <b>',
      axes: ['C1-C2-C3-C4', 'C2-C3-C4-C5'],
      minima: [{ angles: [180, 0] }],
    });
    expect(plot).toContain('<title>a &lt;b&gt;</title>');
    expect(plot).toContain('C2-C3-C4-C5 / degrees');
    expect(plot).toContain('>A</text>');
    expect(plot).toContain('kcal/mol');
    expect(plot).toMatch(/>3<\/text>/);
  });

  it('has names for more minima than there are letters', () => {
    expect([0, 25, 26, 53].map(minimumName)).toEqual(['A', 'Z', 'A2', 'B3']);
  });
});
