import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

const onlyWhenNamed = { exclude: ['**/node_modules/**'] };

export default defineConfig({
  test: {
    maxWorkers: 2,
    testTimeout: 20_000,
    hookTimeout: 60_000,
    projects: [
      {
        test: {
          ...onlyWhenNamed,
          name: 'unit',
          include: ['tests/{stats,shared,structure,server,setup}/**/*.test.ts'],
        },
      },
      {
        plugins: [react()],
        test: {
          ...onlyWhenNamed,
          name: 'client',
          include: ['tests/client/**/*.test.{ts,tsx}'],
          environment: 'happy-dom',
        },
      },
      {
        test: { ...onlyWhenNamed, name: 'reference', include: ['tests/reference/**/*.test.ts'] },
      },
      {
        test: {
          ...onlyWhenNamed,
          name: 'api',
          include: ['tests/api/**/*.test.ts'],
          globalSetup: ['tests/support/database-global-setup.ts'],
        },
      },
      {
        test: {
          ...onlyWhenNamed,
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
