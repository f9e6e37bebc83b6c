import base from './jest.config.mjs';

/** Faults against real processes: one file at a time, so that a kill disturbs nobody else. */
export default { ...base, testMatch: ['<rootDir>/test/faults/**/*.test.ts'], testPathIgnorePatterns: ['/node_modules/'], maxWorkers: 1, testTimeout: 120_000 };
