import { defineConfig } from '@playwright/test';
import { chromiumPath } from './scripts/chromium.mjs';

export default defineConfig({
  testDir: 'tests/pages',
  globalSetup: './tests/support/product.ts',
  outputDir: 'test-results',
  // Nothing here measures time; a busy machine may take long.
  timeout: 300_000,
  expect: { timeout: 30_000 },
  // One product and one queue serve all tests, and two cores serve the product.
  workers: 1,
  reporter: 'list',
  use: {
    // Set by the global set-up; each worker reads this file again after it.
    baseURL: process.env['WINDLASS_TEST_ADDRESS'] ?? 'http://127.0.0.1:0',
    trace: 'retain-on-failure',
    launchOptions: {
      executablePath: chromiumPath,
      args: [
        '--no-sandbox',
        '--disable-dev-shm-usage',
        '--use-angle=swiftshader',
        '--enable-unsafe-swiftshader',
        '--disable-background-networking',
      ],
    },
  },
});
