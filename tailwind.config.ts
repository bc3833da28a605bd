import type { Config } from 'tailwindcss';

/** The names of the design's colors; their values, light and dark, are the CSS variables of app.css. */
export default {
  content: ['./src/**/*.{html,svelte,ts}'],
  theme: {
    extend: {
      colors: Object.fromEntries(
        [
          'paper',
          'sheet',
          'ink',
          'ink-soft',
          'rule',
          'tide',
          'brass',
          'ember',
          'moss',
          'on-tide',
        ].map((name) => [name, `var(--color-${name})`]),
      ),
      fontFamily: {
        sans: ['"Rubik Variable"', 'sans-serif'],
        mono: ['"JetBrains Mono Variable"', 'monospace'],
      },
      maxWidth: { page: '1280px' },
    },
  },
} satisfies Config;
