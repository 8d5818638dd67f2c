import react from '@vitejs/plugin-react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

const apiPort = process.env['PORT'] ?? '4310';
const NUMERIC_TESTS = ['tests/workers/kernels/**/*.test.ts', 'tests/reference/**/*.test.ts'];

export default defineConfig({
  plugins: [react(), tailwindcss()],
  server: { port: 4311, proxy: { '/api': `http://localhost:${apiPort}` } },
  build: { outDir: 'dist/client', emptyOutDir: true, sourcemap: false, chunkSizeWarningLimit: 900 },
  test: {
    // By default a core is left idle; much of the tests' time is waiting for other processes anyway.
    maxWorkers: '100%',
    projects: [
      {
        extends: true,
        test: {
          name: 'node',
          environment: 'node',
          include: ['tests/**/*.test.ts'],
          exclude: ['tests/journeys/**', ...NUMERIC_TESTS],
          testTimeout: 180_000,
          hookTimeout: 180_000,
          retry: 1,
        },
      },
      {
        extends: true,
        test: {
          // Pure functions: they may share a thread and what it has loaded, which saves half a second a file.
          name: 'numeric',
          environment: 'node',
          include: NUMERIC_TESTS,
          pool: 'threads',
          isolate: false,
          testTimeout: 180_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'dom',
          environment: 'jsdom',
          include: ['tests/**/*.test.tsx'],
          setupFiles: ['tests/support/dom-setup.ts'],
          testTimeout: 90_000,
          retry: 1,
        },
      },
      {
        extends: true,
        test: {
          name: 'journeys',
          environment: 'node',
          include: ['tests/journeys/**/*.test.ts'],
          globalSetup: ['tests/support/journey-setup.ts'],
          fileParallelism: false,
          testTimeout: 600_000,
          hookTimeout: 300_000,
        },
      },
    ],
  },
});
