import { describe, expect, it } from 'vitest';
import { layLadder, numberRuns, STROKE_GAP } from './energy-ladder';

const level = (energy: number, chosen = false, length = 20) => ({ energy, chosen, length });
const labelledOf = (levels: Parameters<typeof layLadder>[0]) =>
  layLadder(levels, [0, 300]).rows.map(({ labelled }) => labelled);

describe('layLadder', () => {
  it('puts the lowest level at the bottom and rounds the top up', () => {
    const { ticks, y } = layLadder([level(0), level(4.2)], [10, 310]);
    expect(ticks).toEqual([0, 1, 2, 3, 4, 5]);
    expect(y(0)).toBe(310);
    expect(y(5)).toBe(10);
  });

  it('draws levels of nearly one energy side by side', () => {
    const { rows, offsets } = layLadder([level(0), level(0.02), level(2)], [0, 300]);
    expect(rows.map(({ members }) => members)).toEqual([[0, 1], [2]]);
    expect(offsets).toEqual([0, 20 + STROKE_GAP, 0]);
    expect(rows[0].length).toBe(2 * (20 + STROKE_GAP));
  });

  it('labels the rows that have room, from the lowest', () => {
    expect(labelledOf([level(0), level(0.05), level(2)])).toEqual([true, false, true]);
  });

  it('labels a row with a chosen level before its neighbors', () => {
    expect(labelledOf([level(0), level(0.05, true), level(2)])).toEqual([false, true, true]);
  });

  it('draws a single level too', () => {
    const { ticks, rows } = layLadder([level(0)], [0, 300]);
    expect(ticks.length).toBeGreaterThan(1);
    expect(rows).toHaveLength(1);
  });
});

describe('numberRuns', () => {
  it.each([
    [[3], '3'],
    [[1, 2], '1, 2'],
    [[1, 2, 3, 4, 7], '1–4, 7'],
  ])('%j is %s', (numbers, text) => expect(numberRuns(numbers)).toBe(text));
});
