/** Jest in ESM mode: `npm test` sets --experimental-vm-modules. Plain .mjs needs no transform; .ts goes through swc. */
export default {
  testEnvironment: 'node',
  testMatch: ['<rootDir>/test/**/*.test.mjs', '<rootDir>/test/**/*.test.ts'],
  moduleFileExtensions: ['mjs', 'js', 'ts', 'json', 'node'],
  extensionsToTreatAsEsm: ['.ts'],
  maxWorkers: 2,
  testTimeout: 30_000,
  transform: {
    '\\.ts$': [
      '@swc/jest',
      {
        swcrc: false,
        isModule: true,
        jsc: { parser: { syntax: 'typescript' }, target: 'es2022' },
        module: { type: 'es6' },
      },
    ],
  },
};
