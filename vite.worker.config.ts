/** The second pass of a build: the worker and the programs that run once, beside the web's build. */
import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

export default defineConfig({
  publicDir: false,
  resolve: { alias: { $lib: fileURLToPath(new URL('src/lib', import.meta.url)) } },
  build: {
    ssr: true,
    target: 'node20',
    outDir: `${process.env['WINDLASS_BUILD_FOLDER'] ?? 'build/plain'}/worker`,
    emptyOutDir: true,
    minify: false,
    sourcemap: true,
    rolldownOptions: {
      input: {
        main: 'worker/main.ts',
        thread: 'worker/thread.ts',
        migrate: 'worker/migrate.ts',
        seed: 'worker/seed.ts',
      },
      output: { entryFileNames: '[name].js', chunkFileNames: 'chunks/[name]-[hash].js' },
    },
  },
});
