import { writeFileSync } from 'node:fs';
import type { SerializedError } from 'vitest';
import type { Reporter, TestModule, TestRunEndReason } from 'vitest/node';

/**
 * Writes how many tests passed, failed and were skipped to the file named by SUMMARY_FILE, for the closing line of
 * `npm test`. A file that could not be loaded and an error outside every test count as a failure each.
 */
export class SummaryReporter implements Reporter {
  onTestRunEnd(
    modules: readonly TestModule[],
    unhandledErrors: readonly SerializedError[],
    reason: TestRunEndReason,
  ): void {
    const path = process.env['SUMMARY_FILE'];
    if (path === undefined) return;
    const counts = {
      passed: 0,
      failed: unhandledErrors.length,
      skipped: 0,
      interrupted: reason === 'interrupted',
    };
    for (const module of modules) {
      let failedHere = 0;
      for (const test of module.children.allTests()) {
        const { state } = test.result();
        if (state === 'passed') counts.passed += 1;
        else if (state === 'failed') failedHere += 1;
        else counts.skipped += 1;
      }
      const hasOtherFailure = module.state() === 'failed' && failedHere === 0;
      counts.failed += failedHere + (hasOtherFailure ? 1 : 0);
    }
    writeFileSync(path, JSON.stringify(counts));
  }
}
