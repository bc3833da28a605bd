import { describe, expect, it } from 'vitest';
import { angle, distance, torsion } from '../geometry';
import { createMolecule } from './build';
import type { Bond } from './molecule';
import { placeHydrogens } from './place-hydrogens';

/** A molecule whose first atoms have places; hydrogens follow as "heavy atom" entries. */
function complete(
  elements: readonly number[],
  bonds: readonly Bond[],
  hydrogensOn: readonly number[],
  places: readonly number[],
) {
  const all: Bond[] = [
    ...bonds,
    ...hydrogensOn.map((a, n): Bond => ({ a, b: elements.length + n, order: 1 })),
  ];
  const molecule = createMolecule({
    atomicNumbers: [...elements, ...hydrogensOn.map(() => 1)],
    bonds: all,
    givenAtomCount: elements.length,
  });
  return { molecule, x: placeHydrogens(molecule, places) };
}

// Ideal angles and common bond lengths; common practice, no source.
describe('placeHydrogens', () => {
  it('builds methane from carbon alone', () => {
    const { x } = complete([6], [], [0, 0, 0, 0], [1, 2, 3]);
    for (let hydrogen = 1; hydrogen < 5; hydrogen++) {
      expect(distance(x, 0, hydrogen)).toBeCloseTo(1.09, 6);
      for (let other = 1; other < hydrogen; other++)
        expect(angle(x, hydrogen, 0, other)).toBeCloseTo(109.47, 1);
    }
  });

  it('staggers ethane', () => {
    const { x } = complete(
      [6, 6],
      [{ a: 0, b: 1, order: 1 }],
      [0, 0, 0, 1, 1, 1],
      [0, 0, 0, 1.53, 0, 0],
    );
    const turns = [5, 6, 7].map((hydrogen) => Math.abs(torsion(x, 2, 0, 1, hydrogen)));
    expect(Math.min(...turns)).toBeCloseTo(60, 3);
  });

  it('keeps ethene and formamide flat and acetylene straight', () => {
    const ethene = complete(
      [6, 6],
      [{ a: 0, b: 1, order: 2 }],
      [0, 0, 1, 1],
      [0, 0, 0, 1.33, 0, 0],
    ).x;
    expect(Math.abs(Math.sin((torsion(ethene, 2, 0, 1, 4) * Math.PI) / 180))).toBeLessThan(1e-6);
    expect(angle(ethene, 2, 0, 1)).toBeCloseTo(120, 3);
    const acetylene = complete([6, 6], [{ a: 0, b: 1, order: 3 }], [0, 1], [0, 0, 0, 1.2, 0, 0]).x;
    expect(angle(acetylene, 2, 0, 1)).toBeCloseTo(180, 3);
    const formamide = complete(
      [6, 8, 7],
      [
        { a: 0, b: 1, order: 2 },
        { a: 0, b: 2, order: 1 },
      ],
      [0, 2, 2],
      [0, 0, 0, 0, 1.22, 0, 1.18, -0.68, 0],
    ).x;
    for (const hydrogen of [3, 4, 5])
      expect(Math.abs(formamide[3 * hydrogen + 2])).toBeLessThan(1e-6);
  });

  it("turns an acid's hydrogen to its carbonyl oxygen", () => {
    const { x } = complete(
      [6, 8, 8],
      [
        { a: 0, b: 1, order: 2 },
        { a: 0, b: 2, order: 1 },
      ],
      [0, 2],
      [0, 0, 0, 0, 1.2, 0, 1.17, -0.68, 0],
    );
    expect(torsion(x, 4, 2, 0, 1)).toBeCloseTo(0, 3);
  });

  it('completes three bonds with a fourth opposite to them', () => {
    const { x } = complete(
      [6, 9, 17, 35],
      [1, 2, 3].map((b): Bond => ({ a: 0, b, order: 1 })),
      [0],
      [0, 0, 0, 1.3, 0, -0.46, -0.65, 1.1, -0.46, -0.65, -1.1, -0.46],
    );
    expect(x[12]).toBeCloseTo(0, 1);
    expect(x[14]).toBeCloseTo(1.09, 1);
  });
});
