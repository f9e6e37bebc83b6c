import base from './jest.config.mjs';

/** Measurements, one at a time; they print ratios and judge nothing. */
export default {
  ...base,
  testMatch: ['<rootDir>/test/bench/**/*.bench.ts'],
  maxWorkers: 1,
  testTimeout: 300_000,
  reporters: ['default', '<rootDir>/test/bench/table-reporter.mjs'],
};
