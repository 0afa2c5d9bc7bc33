import js from '@eslint/js';
import jsxA11y from 'eslint-plugin-jsx-a11y';
import reactHooks from 'eslint-plugin-react-hooks';
import { importX } from 'eslint-plugin-import-x';
import { createTypeScriptImportResolver } from 'eslint-import-resolver-typescript';
import tseslint from 'typescript-eslint';

/** Folders in the one direction imports may run: each may import only what stands before it. app/format is a leaf for all. */
const walls = [
  { target: './app/reliability', from: ['./app', './jobs', './db', './fixtures'], except: ['./reliability'] },
  {
    target: './app/advice',
    from: ['./app', './jobs', './db', './fixtures'],
    except: ['./advice', './reliability', './format'],
  },
  {
    target: './app/models',
    from: ['./app/services', './app/charts', './app/components', './app/routes', './jobs', './fixtures'],
  },
  {
    target: './app/services',
    from: ['./app/charts', './app/components', './app/routes', './jobs', './fixtures'],
  },
  {
    target: './app/charts',
    from: ['./app/models', './app/services', './app/routes', './jobs', './db', './fixtures'],
  },
  { target: './app/components', from: ['./app/services', './app/routes', './jobs', './db', './fixtures'] },
  { target: './app/routes', from: ['./jobs', './fixtures'] },
  { target: './jobs', from: ['./app/routes', './app/components'] },
];

export default tseslint.config(
  { ignores: ['node_modules', 'build', '.react-router', '.local', 'test-results'] },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  {
    plugins: { 'import-x': importX, 'react-hooks': reactHooks },
    settings: { 'import-x/resolver-next': [createTypeScriptImportResolver({ project: './tsconfig.json' })] },
    rules: {
      ...reactHooks.configs.recommended.rules,
      'import-x/no-restricted-paths': ['error', { zones: walls }],
      'import-x/no-cycle': 'error',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      eqeqeq: ['error', 'always', { null: 'ignore' }],
    },
  },
  { files: ['app/**/*.tsx'], ...jsxA11y.flatConfigs.recommended },
  {
    files: ['app/reliability/**', 'app/advice/**'],
    rules: {
      'no-restricted-imports': [
        'error',
        { patterns: ['node:*', 'react', 'react-router', 'knex', 'pg', 'luxon'] },
      ],
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'Randomness is passed in.' },
        { object: 'Date', property: 'now', message: 'Time is passed in.' },
      ],
      'no-restricted-globals': ['error', 'Date', 'process', 'fetch'],
    },
  },
  {
    files: ['**/*.mjs'],
    languageOptions: {
      globals: {
        process: 'readonly',
        console: 'readonly',
        setTimeout: 'readonly',
        clearTimeout: 'readonly',
        URL: 'readonly',
        fetch: 'readonly',
        Buffer: 'readonly',
      },
    },
  },
);
