import { expect, it } from 'vitest';
import { readDatabaseState } from './ready';

it('tells that the database is away instead of waiting for it', async () => {
  // Nothing listens at the address that unit tests have.
  expect(await readDatabaseState()).toBe('away');
});
