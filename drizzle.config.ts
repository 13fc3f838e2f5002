import { defineConfig } from 'drizzle-kit';

export default defineConfig({
  dialect: 'mysql',
  schema: './server/modules/**/*.table.ts',
  out: './migrations',
});
