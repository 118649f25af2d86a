import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';
import { samplesFolder } from './tests/setup/samples';

export default defineConfig({
  resolve: { alias: { '~/': fileURLToPath(new URL('./src/', import.meta.url)) } },
  test: {
    env: { RIGWRIGHT_SAMPLES: samplesFolder() ?? '' },
    setupFiles: ['tests/setup/console-guard.ts', 'tests/setup/laws.ts'],
    maxWorkers: 2,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          // One of them loads every route of the API, cold.
          testTimeout: 30_000,
          include: ['src/**/*.test.ts', 'tests/**/*.test.ts', 'local-fakes/**/*.test.ts'],
          exclude: ['tests/integration/**'],
        },
      },
      {
        extends: true,
        test: {
          name: 'integration',
          include: ['tests/integration/**/*.test.ts'],
          globalSetup: ['tests/setup/database-server.ts'],
          setupFiles: ['tests/setup/integration-settings.ts'],
          pool: 'forks',
          testTimeout: 30_000,
          hookTimeout: 60_000,
        },
      },
    ],
  },
});
