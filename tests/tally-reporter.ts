import type { Reporter, SerializedError, TestModule } from 'vitest/node';

/** Ends a run with the plain line `N passed, N failed`; files that failed to load and errors outside tests count as failures. */
export default class TallyReporter implements Reporter {
  onTestRunEnd(modules: readonly TestModule[], errors: readonly SerializedError[]): void {
    let passed = 0;
    let failed = errors.length;
    for (const module of modules) {
      let ran = 0;
      for (const test of module.children.allTests()) {
        ran++;
        // Anything that did not pass counts as failed: a skipped test must not look like a good run.
        if (test.result().state === 'passed') passed++;
        else failed++;
      }
      if (module.errors().length > 0 || ran === 0) failed++;
    }
    process.on('exit', () => process.stdout.write(`\n${passed} passed, ${failed} failed\n`));
  }
}
