import { defineConfig } from 'vitest/config';

/** Pure code: no database, no browser. */
export default defineConfig({
  test: {
    include: ['{shared,server,workers}/**/*.spec.ts', 'test/checks/**/*.spec.ts'],
    pool: 'forks',
    testTimeout: 60_000,
  },
});
