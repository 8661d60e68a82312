import { join } from 'node:path'
import { defineConfig } from 'vitest/config'

const root = join(import.meta.dirname, '../..')

// The long forms of the bars: minutes, not seconds. `npm run soak`.
export default defineConfig({
  root,
  resolve: { alias: { '@': root } },
  test: {
    include: ['tests/soak/**/*.soak.ts'],
    setupFiles: ['tests/setup/database.ts'],
    testTimeout: 1_800_000,
    hookTimeout: 300_000,
    fileParallelism: false,
  },
})
