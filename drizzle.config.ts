import { defineConfig } from 'drizzle-kit';

export default defineConfig({
  dialect: 'mysql',
  casing: 'snake_case',
  schema: './src/server/db/schema/index.ts',
  out: './drizzle',
});
