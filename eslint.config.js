import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

export default ts.config(
  { ignores: ['node_modules/', 'build/', '.svelte-kit/', '.windlass/', 'tests/fixtures/'] },
  js.configs.recommended,
  ...ts.configs.recommended,
  ...svelte.configs.recommended,
  prettier,
  ...svelte.configs.prettier,
  {
    languageOptions: { globals: { ...globals.node, ...globals.browser } },
    rules: {
      '@typescript-eslint/no-unused-vars': [
        'error',
        // Naming a property beside a rest is how it is left out.
        { argsIgnorePattern: '^_', ignoreRestSiblings: true },
      ],
      '@typescript-eslint/consistent-type-imports': 'error',
      eqeqeq: 'error',
      'no-console': 'error',
      'no-param-reassign': 'error',
      'prefer-const': 'error',
      // The product lives at the root of its address, so links need no base path.
      'svelte/no-navigation-without-resolve': 'off',
    },
  },
  {
    files: ['**/*.svelte', '**/*.svelte.ts'],
    languageOptions: { parserOptions: { parser: ts.parser, svelteConfig } },
    // Props and bindings that Svelte assigns look like variables that never change.
    rules: { 'prefer-const': 'off', 'svelte/prefer-const': ['error', { destructuring: 'all' }] },
  },
  {
    // Command-line programs speak through the console.
    files: ['scripts/**', 'tests/**'],
    rules: { 'no-console': 'off' },
  },
  {
    // The same input must give the same numbers: no clock and no unseeded randomness in the engine.
    files: ['src/lib/engine/**/*.ts'],
    ignores: ['**/*.test.ts'],
    rules: {
      'no-restricted-globals': [
        'error',
        'Date',
        'performance',
        'process',
        'fetch',
        'window',
        'document',
        'setTimeout',
        'setImmediate',
      ],
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'Take a seeded Random instead.' },
      ],
    },
  },
  {
    // Settings come from one place, which checks them.
    files: ['src/**/*.ts', 'worker/**/*.ts'],
    ignores: ['src/lib/server/environment.ts', '**/*.test.ts'],
    rules: {
      'no-restricted-properties': [
        'error',
        { object: 'process', property: 'env', message: 'Read it from server/environment.ts.' },
        { object: 'Math', property: 'random', message: 'Take a seeded Random or node:crypto.' },
      ],
    },
  },
);
