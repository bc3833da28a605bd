import { describe, expect, it } from 'vitest';
import { seal, unseal } from './sealing';

describe('a sealed text', () => {
  const sealed = seal('JBSWY3DPEHPK3PXP', 'second factor', 'ada');

  it('is read again by its owner and for its purpose only', () => {
    expect(unseal(sealed, 'second factor', 'ada')).toBe('JBSWY3DPEHPK3PXP');
    expect(() => unseal(sealed, 'second factor', 'bo')).toThrow();
    expect(() => unseal(sealed, 'another purpose', 'ada')).toThrow();
  });

  it('tells nothing, not even that two are equal', () => {
    expect(Buffer.from(sealed, 'base64url').toString('latin1')).not.toContain('JBSWY3DP');
    expect(seal('JBSWY3DPEHPK3PXP', 'second factor', 'ada')).not.toBe(sealed);
  });

  it('is refused when a bit of it was changed', () => {
    const bytes = Buffer.from(sealed, 'base64url');
    for (const place of [0, 12, bytes.length - 1]) {
      const changed = Buffer.from(bytes);
      changed[place]! ^= 1;
      expect(() => unseal(changed.toString('base64url'), 'second factor', 'ada')).toThrow();
    }
  });
});
