import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';

/** @type {import('@sveltejs/kit').Config} */
export default {
  preprocess: vitePreprocess(),
  compilerOptions: { runes: true },
  kit: {
    adapter: adapter({
      // scripts/build.mjs gives each state of the sources a folder of its own.
      out: `${process.env['WINDLASS_BUILD_FOLDER'] ?? 'build/plain'}/web`,
      envPrefix: 'WINDLASS_WEB_',
    }),
    typescript: {
      config: (config) => {
        config.include.push('../worker/**/*.ts', '../scripts/**/*.ts', '../*.config.ts');
      },
    },
    csp: {
      mode: 'nonce',
      directives: {
        'default-src': ['self'],
        'script-src': ['self'],
        // Svelte and the charts set style attributes; scripts stay strict.
        'style-src': ['self', 'unsafe-inline'],
        'img-src': ['self', 'data:', 'blob:'],
        'font-src': ['self'],
        'connect-src': ['self'],
        // The 3-D viewer builds its surfaces in workers made from blobs.
        'worker-src': ['self', 'blob:'],
        'object-src': ['none'],
        'base-uri': ['none'],
        'form-action': ['self'],
        'frame-ancestors': ['none'],
      },
    },
  },
};
