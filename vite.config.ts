import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

export default defineConfig({
  plugins: [tailwindcss(), sveltekit()],
  // Found on the first visit otherwise, which reloads the page in development.
  optimizeDeps: { include: ['ngl', 'openchemlib'] },
  ssr: { external: ['openchemlib'] },
  // Fonts inlined as data would be blocked by the page's own content security policy.
  build: { assetsInlineLimit: 0 },
  test: {
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['src/**/*.test.ts', 'worker/**/*.test.ts', 'tests/**/*.test.ts'],
          exclude: ['tests/flow/**'],
          setupFiles: ['tests/support/chemistry-resources.ts'],
          // Enough for modules that read their settings when loaded; nothing listens there.
          env: {
            DATABASE_URL: 'postgres://nobody@127.0.0.1:1/none',
            AUTH_SECRET: 'only for tests, which sign nothing',
          },
        },
      },
      {
        extends: true,
        test: {
          name: 'flow',
          include: ['tests/flow/**/*.test.ts'],
          globalSetup: ['tests/support/cluster.ts'],
          setupFiles: ['tests/support/chemistry-resources.ts', 'tests/support/database.ts'],
        },
      },
    ],
    testTimeout: 60_000,
    // openchemlib is one large file; a pool of forked processes would parse it once per test file.
    pool: 'threads',
    maxWorkers: 2,
    // A run without a single assertion is a broken test, not a passing one.
    expect: { requireAssertions: true },
  },
});
