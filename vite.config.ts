import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

export default defineConfig({
  resolve: {
    alias: { $lib: fileURLToPath(new URL('./src/lib', import.meta.url)) },
  },
  test: {
    include: ['src/**/*.test.ts', 'tests/**/*.test.ts'],
    setupFiles: ['tests/support/chemistry-resources.ts'],
    testTimeout: 60_000,
    // openchemlib is one large file; a pool of forked processes would parse it once per test file.
    pool: 'threads',
    maxWorkers: 2,
    // A run without a single assertion is a broken test, not a passing one.
    expect: { requireAssertions: true },
  },
});
