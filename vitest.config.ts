import { defineConfig } from 'vitest/config'

const resolve = { alias: { '@': import.meta.dirname } }

// Three floors of tests. 'server' starts the production build, so `npm test` builds first.
export default defineConfig({
  test: {
    maxWorkers: '100%',
    projects: [
      { resolve, test: { name: 'pure', include: ['tests/{unit,reference,architecture}/**/*.test.ts'] } },
      {
        resolve,
        test: {
          name: 'database',
          include: ['tests/{integration,jobs}/**/*.test.ts'],
          setupFiles: ['tests/setup/database.ts'],
          testTimeout: 30_000,
        },
      },
      {
        resolve,
        test: {
          name: 'server',
          include: ['tests/{api,browser}/**/*.test.ts'],
          testTimeout: 120_000,
          hookTimeout: 120_000,
          // A page on a busy machine takes more than the second that is usual for values.
          expect: { poll: { timeout: 20_000 } },
          // Each file has its own server, port and records. More side by side, and they would wait for each other's browsers.
          maxWorkers: 2,
          sequence: { groupOrder: 1 },
        },
      },
    ],
  },
})
