import { defineConfig } from 'vitest/config';

/** Browser scenarios: real Chromium against the built portal, the real server and the local stand-ins; one file after the other. */
export default defineConfig({
  resolve: { conditions: ['source'] },
  ssr: { resolve: { conditions: ['source'] } },
  test: { include: ['e2e/**/*.e2e.ts'], globalSetup: ['./e2e/global-setup.ts'], testTimeout: 180_000, hookTimeout: 120_000, fileParallelism: false },
});
