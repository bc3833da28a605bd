import { describe, expect, it } from 'vitest';
import { createNamer, safeName } from './file-names';

describe('safeName', () => {
  it.each([
    ['butadiene', 'butadiene'],
    ['../../etc/passwd', 'etc_passwd'],
    ['a/b\\c:d*e?f', 'a_b_c_d_e_f'],
    ['  ', 'molecule'],
    ['..', 'molecule'],
    ['CON', 'CON_'],
    ['2,2′-bithiophene', '2_2_-bithiophene'],
    ['Säure', 'Sa_ure'],
    ['x'.repeat(200), 'x'.repeat(60)],
  ])('%j becomes %j', (text, name) => {
    expect(safeName(text)).toBe(name);
  });
});

describe('createNamer', () => {
  it('never gives the same name twice, whatever the case', () => {
    const nameFor = createNamer();
    expect([nameFor('a'), nameFor('A'), nameFor('a'), nameFor('a-2')]).toEqual([
      'a',
      'A-2',
      'a-3',
      'a-2-2',
    ]);
  });
});
