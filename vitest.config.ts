import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

// Tests in these folders, and no others, have a database; all the rest start in a moment.
const WITH_DATABASE = ['auth', 'commands', 'db', 'jobs', 'use-cases', 'api'].map(
  (folder) => `tests/${folder}/**/*.test.ts`,
)

const shared = {
  setupFiles: ['tests/support/silent-console.ts'],
  restoreMocks: true,
}

const ours = fileURLToPath(new URL('.', import.meta.url))

export default defineConfig({
  resolve: { alias: [{ find: /^@\//, replacement: ours }] },
  test: {
    // The machine this is built on has two cores and other work.
    maxWorkers: 2,
    projects: [
      {
        extends: true,
        test: {
          ...shared,
          name: 'unit',
          include: ['tests/**/*.test.{ts,tsx}'],
          exclude: [...WITH_DATABASE, 'tests/e2e/**', 'tests/outside/**'],
          testTimeout: 20_000,
        },
      },
      {
        extends: true,
        test: {
          ...shared,
          name: 'database',
          include: WITH_DATABASE,
          globalSetup: ['tests/support/global-cluster.ts'],
          testTimeout: 30_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          ...shared,
          name: 'outside',
          // Against R and mpmath, which must be installed.
          include: ['tests/outside/**/*.test.ts'],
          testTimeout: 60_000,
        },
      },
    ],
  },
})
