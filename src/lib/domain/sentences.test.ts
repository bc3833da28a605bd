import { describe, expect, it } from 'vitest';
import {
  conjugationSentence,
  conformersSentence,
  duration,
  percent,
  rateText,
  scanSentence,
  strainSentence,
} from './sentences';

describe('numbers for people', () => {
  it.each([
    [0, '0.0 %'],
    [0.0004, 'less than 0.1 %'],
    [0.0144, '1.4 %'],
    [0.652, '65 %'],
    [0.99995, 'more than 99.9 %'],
    [1, '100 %'],
  ])('a share of %d is %s', (share, text) => expect(percent(share)).toBe(text));

  it.each([
    [1e-13, 'less than a picosecond'],
    [3.2e-11, '32 ps'],
    [7.8e-10, '780 ps'],
    [5e-9, '5 ns'],
    [0.02, '20 ms'],
    [1000, '17 min'],
    [86_400 * 3, '3 days'],
    [3.2e9, '100 years'],
  ])('%d s is %s', (seconds, text) => expect(duration(seconds)).toBe(text));
});

/** What was found by a search of conformers. */
const found = {
  model: 'MMFF94s',
  count: 3,
  window: 10,
  lowestPopulation: 0.5,
  temperature: 298.15,
};

describe('sentences', () => {
  it('answers whether a diene reaches s-cis, and at what price', () => {
    expect(
      conjugationSentence(
        {
          bond: 'C2–C3',
          difference: 2.47,
          sCisFraction: 0.0144,
          planarSCisCost: 3.43,
          barrier: 6.18,
          twist: 0,
          inRing: false,
          temperature: 298.15,
        },
        'kcal/mol',
      ),
    ).toBe(
      'C2–C3: s-trans is preferred by 2.5 kcal/mol; 1.4 % s-cis at 25 °C; 6.2 kcal/mol to turn; planar s-cis costs 3.4 kcal/mol.',
    );
  });

  it('says so when a search was not complete', () => {
    expect(conformersSentence({ ...found, complete: false }, 'kcal/mol')).toContain(
      'others may exist',
    );
    expect(conformersSentence({ ...found, complete: true }, 'kcal/mol')).not.toContain('others');
  });

  it('tells the populations of conformers by ΔE and by ΔG apart', () => {
    const sentence = (free: { lowest: number; leader: number; share: number } | null) =>
      conformersSentence({ ...found, complete: true, free }, 'kcal/mol');
    expect(sentence(null)).toMatch(/the lowest holds 50 % by ΔE at 25 °C[.]$/);
    expect(sentence({ lowest: 0.4, leader: 0, share: 0.4 })).toMatch(
      /holds 50 % by ΔE and 40 % by ΔG at 25 °C[.]$/,
    );
    expect(sentence({ lowest: 0.3, leader: 1, share: 0.6 })).toMatch(
      /30 % by ΔG, where conformer 2 leads with 60 %, at 25 °C[.]$/,
    );
  });

  it('names the bond that carries the strain', () => {
    expect(
      strainSentence(
        { model: 'MMFF94s', strain: 4.21, worst: { bond: 'C7–N8', strain: 2.05 }, complete: true },
        'kcal/mol',
      ),
    ).toBe(
      'The uploaded geometry is strained by 4.2 kcal/mol (MMFF94s); C7–N8 carries most of it, 2.0 kcal/mol.',
    );
  });

  describe('of a scan', () => {
    const anti = { label: 'anti', angles: [180], relative: 0, free: null, population: 0.69 };
    const gauche = {
      label: 'gauche',
      angles: [-65, 65],
      relative: 0.78,
      free: null,
      population: 0.31,
    };
    const turnOver = (barrier: number, stability: 1 | 2 | 3) => ({
      barrier,
      rate: 2.3e9,
      halfLife: 3e-10,
      stability,
      free: null,
    });
    const facts = {
      bond: 'C2–C3',
      reading: { forms: [anti, gauche], turn: turnOver(5.01, 1), temperature: 298.15 },
      relaxed: true,
      complete: true,
      converged: true,
    };

    it('answers which form, by how much, how many, and how fast', () => {
      expect(scanSentence(facts, 'kcal/mol')).toBe(
        'C2–C3: anti (180°) is preferred by 0.8 kcal/mol over gauche (±65°); 69 % at 25 °C; 5.0 kcal/mol to turn, 2.3 × 10⁹ s⁻¹, half-life 300 ps with ΔE‡ for ΔG‡, too fast to separate the forms (class 1).',
      );
      expect(scanSentence(facts, 'kJ/mol')).toContain('preferred by 3.3 kJ/mol');
    });

    it('says whether it rests on ΔE or on ΔG where both are known', () => {
      const free = { barrier: 5.4, rate: 6.8e8, halfLife: 1e-9 };
      const reading = {
        ...facts.reading,
        forms: [
          { ...anti, free: 0.1 },
          { ...gauche, free: 0 },
        ],
        turn: { ...turnOver(5.01, 1), free },
      };
      expect(scanSentence({ ...facts, reading }, 'kcal/mol')).toBe(
        'C2–C3: anti (180°) is preferred over gauche (±65°) by ΔE 0.8 kcal/mol, ΔG −0.1 kcal/mol; 69 % by ΔE at 25 °C; ΔG‡ 5.4 kcal/mol to turn (ΔE‡ 5.0 kcal/mol), 6.8 × 10⁸ s⁻¹ and half-life 1 ns by ΔG‡; by ΔE‡ too fast to separate the forms (class 1).',
      );
    });

    it('says in the same sentence what is uncertain', () => {
      expect(scanSentence({ ...facts, relaxed: false }, 'kcal/mol')).toMatch(
        /; rigid profile.*[.]$/,
      );
      expect(scanSentence({ ...facts, complete: false }, 'kcal/mol')).toMatch(
        /; the scan ran out.*[.]$/,
      );
      expect(scanSentence({ ...facts, converged: false }, 'kcal/mol')).toMatch(
        /; some stationary points did not converge[.]$/,
      );
    });

    it('doubts a class when the model’s error reaches the next', () => {
      const near = { ...facts.reading, turn: turnOver(29, 2) };
      expect(scanSentence({ ...facts, reading: near }, 'kcal/mol')).toContain('the next class');
      const far = { ...facts.reading, turn: turnOver(36, 3) };
      expect(scanSentence({ ...facts, reading: far }, 'kcal/mol')).toMatch(/\(class 3\)[.]$/);
    });

    it('says so where there is one form, or none', () => {
      const one = { ...facts.reading, forms: [anti], turn: null };
      expect(scanSentence({ ...facts, reading: one }, 'kcal/mol')).toBe(
        'C2–C3: anti (180°) is the only form.',
      );
      const none = { ...facts.reading, forms: [], turn: null };
      expect(scanSentence({ ...facts, reading: none }, 'kcal/mol')).toBe(
        'C2–C3: no minimum was found.',
      );
    });
  });

  it.each([
    [1.83e8, '1.8 × 10⁸ s⁻¹'],
    [0.25, '0.25 s⁻¹'],
    [3e-7, '3.0 × 10⁻⁷ s⁻¹'],
  ])('a rate of %d is %s', (rate, text) => expect(rateText(rate)).toBe(text));
});
