import { defineConfig } from 'vitest/config';

/** The server against a throw-away MariaDB; a database per test file. */
export default defineConfig({
  test: {
    include: ['test/api/**/*.spec.ts'],
    globalSetup: ['test/support/mariadb.setup.ts'],
    pool: 'forks',
    testTimeout: 60_000,
    hookTimeout: 120_000,
  },
});
