// Three projects: `unit` (pure code), `db` (needs PostgreSQL), `e2e` (PostgreSQL, the built application, a browser).
import { defineConfig } from 'vitest/config'

const source = '{app,engine,studies,drizzle}'

export default defineConfig({
  test: {
    reporters: ['default', './tests/setup/count-reporter.ts'],
    projects: [
      {
        test: {
          name: 'unit',
          include: [
            `${source}/**/*.test.ts`,
            'tests/{reference,crosscheck,properties,setup,bench}/**/*.test.ts',
          ],
          exclude: ['**/*.db.test.ts', '**/*.e2e.test.ts'],
          testTimeout: 60_000,
        },
      },
      {
        test: {
          name: 'db',
          include: [`${source}/**/*.db.test.ts`, 'tests/**/*.db.test.ts'],
          globalSetup: './tests/setup/postgres.ts',
          setupFiles: './tests/setup/database-per-file.ts',
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
      {
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.e2e.test.ts'],
          globalSetup: ['./tests/setup/postgres.ts', './tests/setup/application.ts'],
          fileParallelism: false,
          testTimeout: 180_000,
          hookTimeout: 180_000,
        },
      },
    ],
  },
})
