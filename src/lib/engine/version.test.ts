import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { ENGINE_VERSION } from './version';

it('is the version of the package', () => {
  const { version } = JSON.parse(readFileSync('package.json', 'utf8')) as { version: string };
  expect(ENGINE_VERSION).toBe(version);
});
