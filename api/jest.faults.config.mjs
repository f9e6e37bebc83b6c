import base from './jest.config.mjs';

/** Faults against real processes; each file kills only what it started itself. */
export default { ...base, testMatch: ['<rootDir>/test/faults/**/*.test.ts'], testPathIgnorePatterns: ['/node_modules/'], maxWorkers: 2, testTimeout: 120_000 };
