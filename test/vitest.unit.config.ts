import { defineConfig } from 'vitest/config';

/** Pure code: no database, no browser. */
export default defineConfig({
  test: {
    include: ['{shared,server,workers}/**/*.spec.ts', 'test/checks/**/*.spec.ts'],
    pool: 'forks',
    // By itself it leaves one processor free, and of two that is half the machine.
    maxWorkers: 2,
    testTimeout: 60_000,
  },
});
