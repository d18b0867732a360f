import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';
import { LongestFirst } from './tests/support/longest-first.ts';
import { SummaryReporter } from './tests/support/summary-reporter.ts';

/** Held to the world outside: R, published tables, simulation. Slower than the rest, so not in the fast loop. */
const referenceChecks = [
  'tests/stats/**/*-cases.test.ts',
  'tests/stats/**/published-examples.test.ts',
  'tests/stats/**/reference-grids.test.ts',
  'tests/stats/**/pair-synthesis.test.ts',
  'tests/stats/**/*-calibration.test.ts',
];

export default defineConfig({
  test: {
    maxWorkers: 2,
    sequence: { sequencer: LongestFirst },
    reporters: ['default', new SummaryReporter()],
    testTimeout: 20_000,
    hookTimeout: 60_000,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['tests/{stats,shared,structure,server}/**/*.test.ts'],
          exclude: referenceChecks,
          // Pure functions: to load the engine once for all files, not once for each, takes half of the processor time.
          isolate: false,
        },
      },
      {
        extends: true,
        plugins: [react()],
        test: {
          name: 'client',
          include: ['tests/client/**/*.test.{ts,tsx}'],
          environment: 'happy-dom',
          // As above; what a file leaves on the page is cleared away after it.
          isolate: false,
          setupFiles: ['tests/client/support/clean-page.ts'],
        },
      },
      {
        extends: true,
        test: { name: 'reference', include: referenceChecks, isolate: false },
      },
      {
        extends: true,
        test: {
          name: 'api',
          include: ['tests/{api,setup}/**/*.test.ts'],
          globalSetup: ['tests/support/database-global-setup.ts'],
          // Each file has a database and an application of its own.
          isolate: false,
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.test.ts'],
          globalSetup: ['tests/support/database-global-setup.ts', 'tests/support/build-global-setup.ts'],
          // Each file has a product of its own; they share the browser, in contexts of their own.
          isolate: false,
          testTimeout: 180_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
