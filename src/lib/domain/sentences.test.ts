import { describe, expect, it } from 'vitest';
import {
  conjugationSentence,
  conformersSentence,
  duration,
  percent,
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
    const facts = { count: 3, window: 10, lowestPopulation: 0.5, temperature: 298.15 };
    expect(conformersSentence({ ...facts, complete: false }, 'kcal/mol')).toContain(
      'others may exist',
    );
    expect(conformersSentence({ ...facts, complete: true }, 'kcal/mol')).not.toContain('others');
  });

  it('names the bond that carries the strain', () => {
    expect(
      strainSentence(
        { strain: 4.21, worst: { bond: 'C7–N8', strain: 2.05 }, complete: true },
        'kcal/mol',
      ),
    ).toBe(
      'The uploaded geometry is strained by 4.2 kcal/mol; C7–N8 carries most of it, 2.0 kcal/mol.',
    );
  });

  it('marks a rigid profile', () => {
    const facts = {
      torsion: 'C1–C2–C3–C4',
      preferred: { label: 'anti', angle: 180 },
      barrier: 5.21,
      halfLife: 1e-9,
      temperature: 298.15,
      complete: true,
    };
    expect(scanSentence({ ...facts, relaxed: false }, 'kcal/mol')).toContain('Rigid profile');
    expect(scanSentence({ ...facts, relaxed: true }, 'kcal/mol')).toContain(
      'half-life 1 ns at 25 °C',
    );
  });
});
