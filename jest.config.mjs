import { availableParallelism } from 'node:os';

/** Packages that ship ESM only, or ESM first: jest's CommonJS mode must transform them. */
const ESM_PACKAGES = [
  'is-any-array',
  'ml-[^/]+',
  'react-dropzone',
  '@tanstack/[^/]+',
  'smtp-server',
  'nodemailer',
  'file-selector',
  'attr-accept',
  'jose',
  'uuid',
  '@panva/hkdf',
  'preact',
  'preact-render-to-string',
  'oauth',
];

const transform = {
  '^.+\\.tsx?$': ['ts-jest', { tsconfig: 'tests/tsconfig.json', diagnostics: false }],
  '^.+\\.m?js$': ['ts-jest', { tsconfig: 'tests/tsconfig.packages.json', diagnostics: false }],
};

function project(name, more = {}) {
  return {
    displayName: name,
    rootDir: '.',
    testEnvironment: 'node',
    // `server-only` resolves to nothing under this condition, as it does in the server's own build.
    testEnvironmentOptions: { customExportConditions: ['react-server', 'node', 'require', 'default'] },
    testMatch: [`<rootDir>/tests/${name}/**/*.test.ts`, `<rootDir>/tests/${name}/**/*.test.tsx`],
    moduleNameMapper: { '^@/(.*)$': '<rootDir>/$1' },
    modulePathIgnorePatterns: ['<rootDir>/\\.next', '<rootDir>/\\.data', '<rootDir>/\\.test-data'],
    transform,
    transformIgnorePatterns: [`/node_modules/(?!(${ESM_PACKAGES.join('|')})/)`],
    // Tests run in a context where every look at a global is slow; the numeric loops look at these all the time.
    sandboxInjectedGlobals: ['Math', 'Number', 'Float32Array', 'Float64Array', 'Uint8Array', 'Uint16Array'],
    setupFilesAfterEnv: ['<rootDir>/tests/setup/no-console-error.ts'],
    ...more,
  };
}

const config = {
  // Time limits find what hangs; how long things take is for the benchmark. Machines under load are many times slower.
  testTimeout: 60_000,
  maxWorkers: Math.max(1, Math.min(2, availableParallelism())),
  projects: [
    project('unit'),
    project('architecture'),
    project('integration', {
      moduleNameMapper: {
        '^next/headers$': '<rootDir>/tests/setup/next-headers.ts',
        '^next/navigation$': '<rootDir>/tests/setup/next-navigation.ts',
        '^@/(.*)$': '<rootDir>/$1',
      },
    }),
    project('e2e', { setupFilesAfterEnv: [] }),
  ],
};

export default config;
