import { describe, expect, it } from 'vitest';
import { mapSentence } from './map-sentence';

const facts = { minima: 3, lowest: ['anti', 'anti'], way: null, complete: true };

describe('mapSentence', () => {
  it('names the lowest form and the way to another one', () => {
    const way = { from: 'A', to: 'B', up: 3.61, back: 2.8 };
    expect(mapSentence({ ...facts, way }, 'kcal/mol')).toBe(
      '3 minima; the lowest, A, is anti at both bonds. The lowest way from A to B climbs 3.6 kcal/mol, and 2.8 kcal/mol on the way back, to within the steps of the grid.',
    );
  });

  it('says what is missing', () => {
    expect(mapSentence({ ...facts, minima: 1, lowest: ['E', 'gauche'] }, 'kcal/mol')).toBe(
      'The only minimum is E and gauche.',
    );
    expect(mapSentence({ ...facts, lowest: null, complete: false }, 'kcal/mol')).toBe(
      'No minimum was found. The map ran out of time, so it may miss lower forms.',
    );
  });
});
