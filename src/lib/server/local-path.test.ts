import { describe, expect, it } from 'vitest';
import { localPath } from './local-path';

describe('localPath', () => {
  it.each(['/desk', '/batches/1?page=2', '/'])('keeps %s', (path) => {
    expect(localPath(path, '/fallback')).toBe(path);
  });

  it.each([
    null,
    undefined,
    '',
    'desk',
    'https://elsewhere.example/',
    '//elsewhere.example/',
    '/\\elsewhere.example/',
    '/\t/elsewhere.example/',
    'javascript:alert(1)',
  ])('does not follow %j', (path) => {
    expect(localPath(path, '/fallback')).toBe('/fallback');
  });
});
