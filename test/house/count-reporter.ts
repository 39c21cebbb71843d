import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Reporter, TestModule } from 'vitest/node';

/**
 * Keeps the count of tests for continuous integration, which prints it as its last line.
 * The file is written only where the environment names a folder for it.
 */
export default class CountReporter implements Reporter {
  onTestRunEnd(modules: ReadonlyArray<TestModule>): void {
    const folder = process.env.CHANNELWRIGHT_COUNTS;
    if (!folder) return;
    let passed = 0;
    let failed = 0;
    for (const module of modules) {
      if (module.errors().length > 0) failed += 1;
      for (const test of module.children.allTests()) {
        const state = test.result().state;
        if (state === 'passed') passed += 1;
        else if (state === 'failed') failed += 1;
      }
    }
    writeFileSync(join(folder, 'counts'), `${passed} passed, ${failed} failed\n`);
  }
}
