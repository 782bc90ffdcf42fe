import { defineConfig } from 'vitest/config';
import Order from './tests/setup/order';

const noise = 'tests/setup/console.ts';
const properties = 'tests/setup/properties.ts';
const alone = 'tests/setup/alone.ts';
const database = 'tests/setup/database.ts';
const build = 'tests/setup/build.ts';

export default defineConfig({
  test: {
    experimental: { fsModuleCache: true }, // each project would make the same modules anew
    maxWorkers: 5, // of two cores: journeys and killed workers mostly wait, for plants, the server, the clock
    sequence: { sequencer: Order },
    restoreMocks: true,
    expect: { poll: { timeout: 20_000 } }, // by itself a second, which a busy machine misses
    testTimeout: 60_000, // no test is about speed, and machines differ
    hookTimeout: 120_000,
    projects: [
      {
        extends: true,
        test: {
          name: 'unit',
          include: [
            'src/**/*.test.{ts,tsx}',
            'simulator/**/*.test.ts',
            'tests/reference/**/*.test.ts',
            'tests/bench/**/*.test.ts',
          ],
          isolate: false, // a process and its modules for many small files, not for each
          setupFiles: [noise, properties],
        },
      },
      {
        extends: true,
        test: {
          name: 'architecture',
          include: ['tests/architecture/**/*.test.ts'],
          isolate: false,
          setupFiles: [noise],
        },
      },
      {
        extends: true,
        test: {
          name: 'integration',
          include: ['tests/integration/**/*.test.ts'],
          isolate: false, // the product is read anew for each file, packages once
          sequence: { setupFiles: 'list' },
          setupFiles: [alone, noise, properties],
          globalSetup: [database],
        },
      },
      {
        extends: true,
        test: {
          name: 'migrations',
          include: ['tests/migrations/**/*.test.ts'],
          isolate: false,
          sequence: { setupFiles: 'list' },
          setupFiles: [alone, noise],
          globalSetup: [database],
        },
      },
      {
        extends: true,
        test: {
          name: 'access',
          include: ['tests/access/**/*.test.ts', 'tests/attacks/**/*.test.ts'],
          isolate: false,
          sequence: { setupFiles: 'list' },
          setupFiles: [alone, noise],
          globalSetup: [database, build],
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.test.ts'],
          isolate: false,
          sequence: { setupFiles: 'list' },
          setupFiles: [alone, noise],
          globalSetup: [database, build],
          retry: 1, // a browser on a busy machine may miss its moment once, not twice
          testTimeout: 240_000,
          hookTimeout: 240_000,
        },
      },
    ],
  },
});
