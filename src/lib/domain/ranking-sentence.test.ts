import { describe, expect, it } from 'vitest';
import { rankingSentence } from './ranking-sentence';

const facts = { model: 'GFN2-xTB', depth: 'optimized' as const, gaps: [] };

describe('a new order of conformers in words', () => {
  it('says that the models agree on the lowest', () => {
    const rows = [
      { relative: 0, from: [0] },
      { relative: 1, from: [1] },
    ];
    expect(rankingSentence({ ...facts, rows }, 'MMFF94s', 'kcal/mol')).toBe(
      'The models agree that conformer 1 is the lowest (relaxed by GFN2-xTB).',
    );
  });

  it('begins with another lowest, and says what fell together and what is missing', () => {
    const rows = [
      { relative: 0, from: [2, 3] },
      { relative: 1.24, from: [0] },
    ];
    expect(rankingSentence({ ...facts, rows, gaps: [{}] }, 'MMFF94s', 'kcal/mol')).toBe(
      'The models disagree about the lowest conformer: 1 by MMFF94s, 3 by GFN2-xTB (relaxed by GFN2-xTB), where 1 lies 1.2 kcal/mol above it; 1 fell together with another; 1 could not be computed.',
    );
  });

  it('marks energies on other geometries as rough', () => {
    const rows = [{ relative: 0, from: [0] }];
    expect(rankingSentence({ ...facts, depth: 'energies', rows }, 'MMFF94s', 'kcal/mol')).toContain(
      'GFN2-xTB on MMFF94s geometries, rough',
    );
  });
});
