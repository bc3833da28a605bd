import { describe, expect, it } from 'vitest';
import { createMolecule } from './build';
import type { Bond, Stereocenter } from './molecule';
import { hasRightStereo, stereoOf } from './stereo';

/** CHFClBr-like center 0 with neighbors 1 to 4 at the corners of a tetrahedron. */
const CORNERS = [0, 0, 0, 0, 0, 1, 0.94, 0, -0.33, -0.47, 0.82, -0.33, -0.47, -0.82, -0.33];

function center(neighbors: Stereocenter['neighbors'], clockwise: boolean) {
  const bonds: Bond[] = [1, 2, 3, 4].map((b) => ({ a: 0, b, order: 1 }));
  return createMolecule({
    atomicNumbers: [6, 1, 9, 17, 35],
    bonds,
    stereocenters: [{ atom: 0, neighbors, clockwise }],
  });
}

describe('stereoOf', () => {
  it('sees neighbors run counterclockwise from above', () => {
    // Seen from atom 1 at the top, atoms 2, 3, 4 lie at 0°, 120° and 240° of a plane drawn with y upward.
    const x = Float64Array.from(CORNERS);
    expect(stereoOf(center([1, 2, 3, 4], false), x)).toEqual([]);
    expect(stereoOf(center([1, 2, 3, 4], true), x)).toEqual([
      { kind: 'stereocenter', atom: 0, found: 'inverted' },
    ]);
    expect(hasRightStereo(center([2, 1, 3, 4], true), x)).toBe(true);
    expect(hasRightStereo(center([2, 1, 4, 3], false), x)).toBe(true);
  });

  it('calls a center flat when its neighbors lie in a plane', () => {
    const x = Float64Array.from([0, 0, 0, 1, 0, 0, 0, 1, 0, -1, 0, 0, 0, -1, 0.01]);
    expect(stereoOf(center([1, 2, 3, 4], true), x)).toMatchObject([{ found: 'flat' }]);
  });

  it('puts the lone pair opposite three bonds', () => {
    const bonds: Bond[] = [1, 2, 3].map((b) => ({ a: 0, b, order: 1 }));
    const sulfur = (clockwise: boolean) =>
      createMolecule({
        atomicNumbers: [16, 6, 7, 8],
        bonds,
        stereocenters: [{ atom: 0, neighbors: [1, 2, 3, -1], clockwise }],
      });
    // The pair points up; seen from it atoms 1, 2, 3 run counterclockwise, so from atom 1 the rest does the opposite of (pair; 1, 2, 3).
    const x = Float64Array.from([0, 0, 0, ...CORNERS.slice(6)]);
    expect(hasRightStereo(sulfur(true), x)).toBe(true);
    expect(hasRightStereo(sulfur(false), x)).toBe(false);
  });

  it('compares double bonds by their torsion', () => {
    const butene = createMolecule({
      atomicNumbers: [6, 6, 6, 6],
      bonds: [
        { a: 0, b: 1, order: 1 },
        { a: 1, b: 2, order: 2 },
        { a: 2, b: 3, order: 1 },
      ],
      stereobonds: [{ bond: 1, atoms: [0, 1, 2, 3], cis: true }],
    });
    const cis = Float64Array.from([-0.7, 1.2, 0, 0, 0, 0, 1.3, 0, 0, 2, 1.2, 0]);
    const trans = Float64Array.from([-0.7, 1.2, 0, 0, 0, 0, 1.3, 0, 0, 2, -1.2, 0]);
    expect(stereoOf(butene, cis)).toEqual([]);
    expect(stereoOf(butene, trans)).toEqual([{ kind: 'stereobond', bond: 1, found: 'trans' }]);
  });
});
