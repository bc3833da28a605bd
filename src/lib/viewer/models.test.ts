import { describe, expect, it } from 'vitest';
import { coordinatesOf } from '../domain/molfile-geometry';
import { readMolecule, writeMolfile } from '../engine';
import { farthestAtom, layOver } from './models';

const ethanol = readMolecule({ smiles: 'CCO' });
/** Some geometry: nothing here depends on which. */
const given = Float64Array.from({ length: 3 * ethanol.atomCount }, (_, n) =>
  Number((Math.sin(2.7 * n) + 0.3 * n).toFixed(4)),
);
/** The same turned a quarter about z and shifted. */
const turned = given.map((_, n) => {
  const atom = n - (n % 3);
  return [-given[atom + 1] + 5, given[atom] - 2, given[atom + 2] + 1][n % 3];
});
const asMolfile = (x: Float64Array) => writeMolfile(ethanol, x);

describe('layOver', () => {
  it('brings a geometry that was turned and shifted back onto the first', () => {
    const [first, second] = layOver([asMolfile(given), asMolfile(turned)], [0, 1, 2, 3]);
    expect(first.rmsd).toBe(0);
    expect(second.rmsd).toBeLessThan(1e-4);
    coordinatesOf(second.molfile).forEach((value, n) => expect(value).toBeCloseTo(given[n], 3));
  });

  it('fits the chosen atoms only, and carries the others along', () => {
    const bent = turned.slice();
    bent[3 * 8] += 3;
    const [, onCore] = layOver([asMolfile(given), asMolfile(bent)], [0, 1, 2, 3]);
    expect(onCore.rmsd).toBeLessThan(1e-4);
    const [, onAll] = layOver(
      [asMolfile(given), asMolfile(bent)],
      Array.from({ length: ethanol.atomCount }, (_, atom) => atom),
    );
    // One of nine atoms is 3 Å off: a fit over all can take some of it away, but never add to it.
    expect(onAll.rmsd).toBeGreaterThan(0.5);
    expect(onAll.rmsd).toBeLessThanOrEqual(3 / Math.sqrt(9));
  });

  it('has nothing to do with nothing', () => expect(layOver([], [0])).toEqual([]));
});

describe('farthestAtom', () => {
  it('is where a geometry leaves the others', () => {
    const other = given.slice();
    other[3 * 5] += 2;
    other[3 * 2] += 0.5;
    expect(farthestAtom(given, [other], [0, 1, 2, 5])).toBe(5);
    expect(farthestAtom(given, [other], [0, 1, 2])).toBe(2);
  });
});
