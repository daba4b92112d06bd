import { defineConfig } from 'vitest/config';
import react from '@vitejs/plugin-react';

/** Four projects: what runs in plain Node, the API over HTTP, the client in jsdom, and the built site in Chromium. */
export default defineConfig({
  test: {
    projects: [
      {
        test: {
          name: 'numerics', environment: 'node', testTimeout: 60_000,
          include: ['tests/solvers/**/*.test.ts', 'tests/shared/**/*.test.ts', 'tests/contract/**/*.test.ts', 'tests/reference/**/*.test.ts'],
        },
      },
      { test: { name: 'api', environment: 'node', testTimeout: 60_000, hookTimeout: 60_000, include: ['tests/api/**/*.test.ts'], pool: 'forks', maxWorkers: 2 } },
      { plugins: [react()], test: { name: 'app', environment: 'jsdom', testTimeout: 60_000, setupFiles: ['tests/support/app-setup.ts'], include: ['tests/app/**/*.test.{ts,tsx}'] } },
      {
        test: {
          name: 'browser', environment: 'node', testTimeout: 300_000, hookTimeout: 300_000, include: ['tests/browser/**/*.test.ts'],
          pool: 'forks', fileParallelism: false, maxWorkers: 1,
        },
      },
    ],
  },
});
