import { defineConfig } from 'vitest/config';

/** The product as a person starts it, driven in headless Chromium. */
export default defineConfig({
  test: {
    include: ['test/e2e/**/*.spec.ts'],
    globalSetup: ['test/support/product.setup.ts'],
    pool: 'forks',
    fileParallelism: false,
    testTimeout: 180_000,
    hookTimeout: 600_000,
  },
});
