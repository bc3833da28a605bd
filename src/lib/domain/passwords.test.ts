import { describe, expect, it } from 'vitest';
import { findPasswordFault, LONGEST_PASSWORD } from './passwords';

describe('findPasswordFault', () => {
  it.each(['', 'short', 'elevenchars', 'ünïcödé-élf'])('refuses %j as too short', (password) => {
    expect(findPasswordFault(password)).toMatch(/at least 12/);
  });

  it('counts characters as a person does, not code units', () => {
    expect(findPasswordFault('🦀🐙🐌🦑🐢🦉🦊🐿🦔🐝🐞')).toMatch(/this has 11/);
  });

  it('refuses what is longer than it will hash', () => {
    expect(findPasswordFault('ab '.repeat(LONGEST_PASSWORD))).toMatch(/at most/);
  });

  it.each([
    'password1234',
    'Password2026!',
    'P@ssw0rd!!!!!',
    'passwordpassword',
    '123456789012',
    'qwertyuiopas',
    'abcabcabcabc',
    'aaaaaaaaaaaaa',
    'zyxwvutsrqponm',
    '1q2w3e4r5t6y',
    'Welcome12345',
    'windlass-2026',
    'correct horse battery staple',
  ])('refuses %j as common', (password) => {
    expect(findPasswordFault(password)).toMatch(/first passwords/);
  });

  it.each(['ines.vogt@skerry.example', 'ines.vogt123', '2026 Ines Vogt'])(
    'refuses %j to Ines Vogt',
    (password) => {
      expect(findPasswordFault(password, ['ines.vogt@skerry.example', 'Ines Vogt'])).toMatch(
        /name/,
      );
    },
  );

  it.each([
    'wet lantern over nine hills',
    'k7fq-3m2p-x9wd-aa4h',
    'ßteinerne brücke',
    'no capitals here',
  ])('accepts %j, whatever it is made of', (password) => {
    expect(findPasswordFault(password, ['someone@skerry.example', 'Some One'])).toBeNull();
  });
});
