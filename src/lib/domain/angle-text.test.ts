import { describe, expect, it } from 'vitest';
import { angleText } from './angle-text';

describe('angleText', () => {
  it.each([
    [-179.97, 1, '180.0'],
    [-179.9, 1, '-179.9'],
    [180, 0, '180'],
    [-0.04, 1, '0.0'],
    [-64.96, 1, '-65.0'],
  ])('writes %d with %d digits as %s', (angle, digits, text) =>
    expect(angleText(angle, digits)).toBe(text),
  );
});
