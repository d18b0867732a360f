import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';
import { SummaryReporter } from './tests/support/summary-reporter.ts';

export default defineConfig({
  test: {
    maxWorkers: 2,
    reporters: ['default', new SummaryReporter()],
    testTimeout: 20_000,
    hookTimeout: 60_000,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['tests/{stats,shared,structure,server}/**/*.test.ts'],
        },
      },
      {
        extends: true,
        plugins: [react()],
        test: {
          name: 'client',
          include: ['tests/client/**/*.test.{ts,tsx}'],
          environment: 'happy-dom',
        },
      },
      {
        extends: true,
        test: { name: 'reference', include: ['tests/reference/**/*.test.ts'] },
      },
      {
        extends: true,
        test: {
          name: 'api',
          include: ['tests/{api,setup}/**/*.test.ts'],
          globalSetup: ['tests/support/database-global-setup.ts'],
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.test.ts'],
          globalSetup: ['tests/support/database-global-setup.ts', 'tests/support/build-global-setup.ts'],
          testTimeout: 90_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
