import { describe, expect, it } from 'vitest';
import { distinctions, settingsPhrases } from './settings-text';

const createdAt = new Date('2026-12-01T10:00:00Z');
const scan = (settings: Record<string, unknown>, subject = 'C2–C3') => ({
  subject,
  settings: { step: 15, relaxed: true, variant: 'MMFF94s', temperature: 298.15, ...settings },
  engineVersion: '0.1.0',
  createdAt,
});

describe('settings in words', () => {
  it('says what was asked for, and not which bond', () => {
    expect(settingsPhrases({ kind: 'scan', bond: [1, 2], ...scan({}).settings })).toEqual([
      'relaxed',
      'every 15°',
      'MMFF94s',
      '298.15 K',
    ]);
  });

  it('tells results apart by the settings in which they differ, and the day', () => {
    expect(distinctions([scan({}), scan({ relaxed: false })])).toEqual([
      'relaxed, 1 Dec 2026',
      'rigid, 1 Dec 2026',
    ]);
  });

  it('tells nothing apart that is alone', () => {
    expect(distinctions([scan({}), scan({ step: 5 }, 'C4–C5')])).toEqual(['', '']);
  });

  it('names the version where that is all that differs', () => {
    const newer = { ...scan({}), engineVersion: '0.2.0' };
    expect(distinctions([scan({}), newer])).toEqual([
      'version 0.1.0, 1 Dec 2026',
      'version 0.2.0, 1 Dec 2026',
    ]);
  });
});
