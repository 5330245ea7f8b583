import { writeFileSync } from 'node:fs';
import type { Reporter, TestModule } from 'vitest/node';

export interface Counts {
  passed: number;
  failed: number;
  skipped: number;
  /** One line for each skipped test: its name and why. */
  skips: string[];
}

/** Counts tests for the sum over all runners; writes them as JSON to the file named by MOTEBOOK_TEST_COUNTS. */
export default class CountReporter implements Reporter {
  onTestRunEnd(modules: readonly TestModule[], unhandled: readonly unknown[]): void {
    const counts: Counts = { passed: 0, failed: unhandled.length, skipped: 0, skips: [] };
    for (const file of modules) {
      // A file that does not load, or a preparation that fails, hides its tests: it counts as a failure of its own.
      counts.failed += file.errors().length;
      for (const suite of file.children.allSuites()) counts.failed += suite.errors().length;
      for (const test of file.children.allTests()) {
        const result = test.result();
        if (result.state === 'passed') counts.passed += 1;
        else if (result.state === 'failed') counts.failed += 1;
        else {
          counts.skipped += 1;
          const why = result.state === 'skipped' ? result.note : 'it never ran';
          counts.skips.push(`${file.relativeModuleId}: ${test.fullName}${why ? ` (${why})` : ''}`);
        }
      }
    }
    const target = process.env.MOTEBOOK_TEST_COUNTS;
    if (target) writeFileSync(target, JSON.stringify(counts));
  }
}
