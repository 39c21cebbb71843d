import { defineConfig } from 'vitest/config';

// One runner for the unit tests beside the code and for what spans folders.
export default defineConfig({
  root: new URL('..', import.meta.url).pathname,
  test: {
    include: ['{solver,db,main,renderer}/**/*.test.{ts,tsx}', 'test/**/*.test.ts'],
    exclude: ['node_modules/**', 'dist/**'],
    pool: 'forks',
    maxWorkers: 2,
    // No test is timed: this only ends what hangs, on the busiest machine too.
    testTimeout: 300_000,
    hookTimeout: 300_000,
    expect: { poll: { timeout: 60_000, interval: 50 } },
    reporters: ['default', './test/house/count-reporter.ts'],
  },
});
