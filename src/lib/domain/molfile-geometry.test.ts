import { describe, expect, it } from 'vitest';
import { coordinatesOf, withCoordinates } from './molfile-geometry';

const molfile = [
  'hydrogen fluoride',
  '  Windlass          3D',
  '',
  '  2  1  0  0  0  0            999 V2000',
  '   -0.4600    0.0000    1.2500 H   0  0  0  0  0  0  0  0  0  0  0  0',
  '    0.4600    0.0000    0.0000 F   0  0  0  0  0  0  0  0  0  0  0  0',
  '  1  2  1  0',
  'M  END',
  '',
].join('\n');

describe('the geometry of a molfile', () => {
  it('is read atom by atom', () => {
    expect([...coordinatesOf(molfile)]).toEqual([-0.46, 0, 1.25, 0.46, 0, 0]);
  });

  it('is replaced, and nothing else', () => {
    const moved = withCoordinates(molfile, Float64Array.of(-12.5, 1, 2, 3, 104.25, -0.00001));
    expect([...coordinatesOf(moved)]).toEqual([-12.5, 1, 2, 3, 104.25, -0]);
    expect(withCoordinates(moved, coordinatesOf(molfile))).toBe(molfile);
  });
});
