import js from '@eslint/js';
import astro from 'eslint-plugin-astro';
import reactHooks from 'eslint-plugin-react-hooks';
import { defineConfig } from 'eslint/config';
import globals from 'globals';
import tseslint from 'typescript-eslint';

/** Rules that ask the compiler. */
const BY_TYPES = {
  files: ['**/*.{ts,tsx}'],
  ignores: ['**/*.astro/*.ts', '**/*.d.mts'],
  languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
  rules: {
    '@typescript-eslint/no-floating-promises': 'error',
    '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
    '@typescript-eslint/await-thenable': 'error',
    '@typescript-eslint/only-throw-error': 'error',
    '@typescript-eslint/no-unnecessary-type-assertion': 'error',
    '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
  },
};

export default defineConfig(
  { ignores: ['dist/', '.astro/', 'node_modules/', 'test-results/'] },
  { linterOptions: { reportUnusedDisableDirectives: 'error' } },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  ...astro.configs.recommended,
  {
    languageOptions: { globals: { ...globals.node } },
    rules: {
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      'no-var': 'error',
      'prefer-const': 'error',
      'object-shorthand': 'error',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
    },
  },
  BY_TYPES,
  {
    files: ['src/{components,features,lib}/**/*.{ts,tsx}'],
    plugins: { 'react-hooks': reactHooks },
    // those for a compiler that is not used cost a quarter of the linter's time
    rules: { 'react-hooks/rules-of-hooks': 'error', 'react-hooks/exhaustive-deps': 'error' },
    languageOptions: { globals: { ...globals.browser } },
  },
  {
    files: ['**/*.astro'],
    languageOptions: { globals: { ...globals.browser } },
  },
);
