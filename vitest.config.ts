import { defineConfig } from 'vitest/config'

export default defineConfig({
  test: {
    projects: [
      {
        test: {
          name: 'unit',
          include: ['{app,engine,studies,drizzle}/**/*.test.ts', 'tests/{reference,crosscheck,setup}/**/*.test.ts'],
          exclude: ['**/*.db.test.ts'],
        },
      },
    ],
  },
})
