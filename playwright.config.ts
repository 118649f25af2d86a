import { defineConfig } from 'playwright/test';
import { chromiumAt } from './tests/setup/chromium';

/** The application's address; `npm test` starts one and names it. */
const baseURL = process.env['RIGWRIGHT_E2E_URL'];
if (!baseURL)
  throw new Error('Run the end-to-end tests by “npm test -- tests/e2e”: it starts the application.');

export default defineConfig({
  testDir: 'tests/e2e',
  testMatch: '**/*.e2e.ts',
  outputDir: '.test/e2e-results',
  // The tests share one application and its demo works; each orders and changes only what is its own.
  workers: 2,
  timeout: 120_000,
  forbidOnly: process.env['CI'] !== undefined,
  reporter: [['list'], ['json', { outputFile: process.env['RIGWRIGHT_E2E_REPORT'] ?? '.test/e2e.json' }]],
  use: {
    baseURL,
    trace: 'retain-on-failure',
    screenshot: 'only-on-failure',
    launchOptions: chromiumAt,
  },
});
