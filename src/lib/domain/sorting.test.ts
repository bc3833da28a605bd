import { describe, expect, it } from 'vitest';
import { sortedBy, sortedNext } from './sorting';

const rows = [
  { name: 'C10–C2', energy: 3 },
  { name: 'C2–C3', energy: null },
  { name: 'C9–C1', energy: -1 },
  { name: 'c2–C4', energy: 3 },
];

describe('sortedBy', () => {
  it('orders numbers by size, keeps equal rows in their order and puts the empty ones last', () => {
    const ascending = sortedBy(rows, ({ energy }) => energy, false);
    expect(ascending.map(({ name }) => name)).toEqual(['C9–C1', 'C10–C2', 'c2–C4', 'C2–C3']);
    const descending = sortedBy(rows, ({ energy }) => energy, true);
    expect(descending.map(({ name }) => name)).toEqual(['C10–C2', 'c2–C4', 'C9–C1', 'C2–C3']);
  });

  it('orders names by the numbers in them', () => {
    const named = sortedBy(rows, ({ name }) => name, false).map(({ name }) => name);
    expect(named).toEqual(['C2–C3', 'c2–C4', 'C9–C1', 'C10–C2']);
  });

  it('leaves the rows given alone', () => {
    const before = [...rows];
    sortedBy(rows, ({ energy }) => energy, true);
    expect(rows).toEqual(before);
  });
});

describe('sortedNext', () => {
  it('turns the order of the same column and begins another one upward', () => {
    expect(sortedNext({ column: 'a', descending: false }, 'a').descending).toBe(true);
    expect(sortedNext({ column: 'a', descending: true }, 'a').descending).toBe(false);
    expect(sortedNext({ column: 'a', descending: true }, 'b')).toEqual({
      column: 'b',
      descending: false,
    });
  });
});
