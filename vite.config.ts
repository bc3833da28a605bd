import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

export default defineConfig({
  plugins: [tailwindcss(), sveltekit()],
  // Found on the first visit otherwise, which reloads the page in development.
  optimizeDeps: { include: ['ngl', 'openchemlib'] },
  ssr: { external: ['openchemlib'] },
  test: {
    include: ['src/**/*.test.ts', 'worker/**/*.test.ts', 'tests/**/*.test.ts'],
    setupFiles: ['tests/support/chemistry-resources.ts'],
    testTimeout: 60_000,
    // openchemlib is one large file; a pool of forked processes would parse it once per test file.
    pool: 'threads',
    maxWorkers: 2,
    // A run without a single assertion is a broken test, not a passing one.
    expect: { requireAssertions: true },
  },
});
