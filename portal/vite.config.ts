import react from '@vitejs/plugin-react';
import { defaultClientConditions } from 'vite';
import { defineConfig } from 'vitest/config';
import { buildId } from './build-id.ts';

export default defineConfig({
  plugins: [react(), buildId()],
  // @tallypole/shared straight from its TypeScript
  resolve: { conditions: ['source', ...defaultClientConditions] },
  ssr: { resolve: { conditions: ['source'] } },
  build: {
    target: 'es2022',
    manifest: true,
    sourcemap: false,
    // what every page needs comes in one piece instead of a dozen small ones
    rolldownOptions: { output: { codeSplitting: { groups: [{ name: 'base', test: /node_modules\/(react|react-dom|react-router|react-router-dom|scheduler|@tanstack|ky|clsx)\// }] } } },
  },
  server: { host: '127.0.0.1', port: 4301, strictPort: true, proxy: { '/api': 'http://127.0.0.1:4300' } },
  test: {
    environment: 'happy-dom',
    globals: false,
    setupFiles: ['./src/testing/setup.ts'],
    css: { modules: { classNameStrategy: 'non-scoped' } },
    include: ['src/**/*.spec.{ts,tsx}'],
  },
});
