import { describe, expect, it } from 'vitest';
import { besideAtom, besideBond, placeOf, type PlacedStructure } from './drawings';

/** Three atoms in an angle: 0 above 1, and 2 to the right of 1. */
const drawing: PlacedStructure = {
  viewBox: [0, 0, 40, 40],
  markup: '',
  atoms: [
    { atom: 0, x: 10, y: 10 },
    { atom: 1, x: 10, y: 30 },
    { atom: 2, x: 30, y: 30 },
  ],
  bonds: [
    { x1: 10, y1: 10, x2: 10, y2: 30 },
    { x1: 10, y1: 30, x2: 30, y2: 30 },
  ],
};

describe('places beside a drawing', () => {
  it('are on the side of a bond where nothing is drawn', () => {
    const [from, to] = [placeOf(drawing, 0)!, placeOf(drawing, 1)!];
    // Two places are as far from the bond itself; only the left one is free of atom 2.
    const crowded: PlacedStructure = {
      ...drawing,
      atoms: [...drawing.atoms, { atom: 3, x: 18, y: 20 }],
    };
    expect(besideBond(crowded, from, to, 8)).toEqual({ x: 2, y: 20 });
  });

  it('are on the open side of an atom', () => {
    const { x, y } = besideAtom(drawing, placeOf(drawing, 1)!, 8);
    expect(x).toBeLessThan(10);
    expect(y).toBeGreaterThan(30);
  });

  it('are not there for an atom that is not drawn', () => {
    expect(placeOf(drawing, 7)).toBeNull();
  });
});
