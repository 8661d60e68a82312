import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll } from 'vitest'

// A migrated file per test file: `:memory:` has a single connection, so it cannot show how two writers meet.
// Set before the dynamic imports below, because db/connection reads the path when it is first imported.
const directory = mkdtempSync(join(tmpdir(), 'kilnward-'))
process.env['DATA_DIR'] = directory

beforeAll(async () => {
  const { database, databaseFile } = await import('@/db/connection')
  const { migrate } = await import('@/db/migrator')
  await migrate(databaseFile())
  return () => database.close()
})
afterAll(() => rmSync(directory, { recursive: true, force: true }))
