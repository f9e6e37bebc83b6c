import { defineConfig } from 'vitest/config';

/** Measures pages in real Chromium on a slowed phone: apart from the tests, and judging nothing. */
export default defineConfig({
  resolve: { conditions: ['source'] },
  ssr: { resolve: { conditions: ['source'] } },
  test: { include: ['lighthouse/**/*.lighthouse.ts'], globalSetup: ['./e2e/global-setup.ts'], testTimeout: 600_000, hookTimeout: 120_000, fileParallelism: false },
});
