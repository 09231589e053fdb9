import nextVitals from 'eslint-config-next/core-web-vitals';
import nextTypescript from 'eslint-config-next/typescript';

const config = [
  {
    ignores: [
      'node_modules/**',
      '.next*/**',
      '.build/**',
      '.data/**',
      '.test-data/**',
      'coverage/**',
      'next-env.d.ts',
      'public/**',
    ],
  },
  ...nextVitals,
  ...nextTypescript,
  {
    rules: {
      'no-console': 'error',
      'no-empty': ['error', { allowEmptyCatch: false }],
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', ignoreRestSiblings: true }],
    },
  },
  {
    // The environment is read once, in lib/server/env.ts.
    files: ['app/**', 'components/**', 'lib/**', 'models/**', 'migrations/**'],
    ignores: ['lib/server/env.ts'],
    rules: {
      'no-restricted-properties': [
        'error',
        { object: 'process', property: 'env', message: 'Read it through lib/server/env.ts.' },
      ],
    },
  },
  {
    // The measurement is arithmetic: the same input gives the same answer, so no clock and no chance.
    files: ['lib/imaging/**', 'lib/fit/**', 'lib/quantity/**', 'lib/statistics/**'],
    ignores: ['lib/imaging/decode.ts'],
    rules: {
      'no-restricted-globals': ['error', 'fetch', 'process', 'window', 'document'],
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'Randomness is an argument.' },
        { object: 'Date', property: 'now', message: 'Time is an argument.' },
      ],
    },
  },
  { files: ['scripts/**', 'tests/**', '*.mjs'], rules: { 'no-console': 'off' } },
];

export default config;
