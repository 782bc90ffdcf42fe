import { defineConfig } from 'vitest/config';

const noise = 'tests/setup/console.ts';
const database = { globalSetup: ['tests/setup/database.ts'], testTimeout: 30_000, hookTimeout: 60_000 };

export default defineConfig({
  test: {
    maxWorkers: 2,
    restoreMocks: true,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: ['src/**/*.test.{ts,tsx}', 'simulator/**/*.test.ts', 'tests/reference/**/*.test.ts'],
          setupFiles: [noise],
        },
      },
      {
        extends: true,
        test: { name: 'architecture', include: ['tests/architecture/**/*.test.ts'], setupFiles: [noise] },
      },
      {
        extends: true,
        test: {
          name: 'integration',
          include: ['tests/integration/**/*.test.ts'],
          setupFiles: [noise],
          ...database,
        },
      },
      {
        extends: true,
        test: {
          name: 'migrations',
          include: ['tests/migrations/**/*.test.ts'],
          setupFiles: [noise],
          ...database,
        },
      },
      {
        extends: true,
        test: {
          name: 'access',
          include: ['tests/access/**/*.test.ts'],
          setupFiles: [noise],
          ...database,
          globalSetup: ['tests/setup/database.ts', 'tests/setup/build.ts'],
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.test.ts'],
          setupFiles: [noise],
          ...database,
          globalSetup: ['tests/setup/database.ts', 'tests/setup/build.ts'],
          fileParallelism: false,
          testTimeout: 240_000,
          hookTimeout: 240_000,
        },
      },
    ],
  },
});
