/** Jest in ESM mode (`npm test` sets --experimental-vm-modules); swc compiles with decorators. */
export default {
  testEnvironment: 'node',
  testEnvironmentOptions: { customExportConditions: ['source', 'node', 'node-addons'] },
  testMatch: ['<rootDir>/src/**/*.spec.ts', '<rootDir>/test/**/*.test.ts'],
  testPathIgnorePatterns: ['<rootDir>/test/faults/', '/node_modules/'],
  maxWorkers: 2,
  testTimeout: 60_000,
  extensionsToTreatAsEsm: ['.ts'],
  globalSetup: '<rootDir>/test/global-setup.mjs',
  globalTeardown: '<rootDir>/test/global-teardown.mjs',
  transform: {
    '\\.ts$': [
      '@swc/jest',
      {
        swcrc: false,
        isModule: true,
        jsc: {
          parser: { syntax: 'typescript', decorators: true },
          transform: { legacyDecorator: true, decoratorMetadata: true, useDefineForClassFields: true },
          target: 'es2022',
          keepClassNames: true,
        },
        module: { type: 'es6' },
        sourceMaps: 'inline',
      },
    ],
  },
  transformIgnorePatterns: ['/node_modules/'],
};
