import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

export default defineConfig({
  plugins: [react()],
  test: {
    reporters: ['default', './tests/tally-reporter.ts'],
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: [
            'tests/*.test.ts',
            'tests/shared/**/*.test.ts',
            'tests/fuzz/**/*.test.ts',
            'tests/content/**/*.test.ts',
          ],
          pool: 'threads',
          isolate: false,
          testTimeout: 30_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'server',
          include: ['tests/server/**/*.test.ts'],
          pool: 'forks',
          isolate: false,
          globalSetup: ['tests/server/database-template.ts'],
          testTimeout: 30_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'client',
          include: ['tests/client/**/*.test.{ts,tsx}'],
          environment: 'jsdom',
          setupFiles: ['tests/client/setup.ts'],
          testTimeout: 20_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.test.ts'],
          pool: 'forks',
          fileParallelism: false,
          globalSetup: ['tests/e2e/server.ts'],
          testTimeout: 120_000,
          hookTimeout: 120_000,
          retry: 0,
        },
      },
    ],
  },
});
