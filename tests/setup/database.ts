import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll } from 'vitest'

// A migrated file per test file: `:memory:` has a single connection, so it cannot show how two writers meet.
// Set before the dynamic imports below, because db/connection reads the path when it is first imported.
const directory = mkdtempSync(join(tmpdir(), 'kilnward-'))
process.env['DATA_DIR'] = directory

// Settings that commands read; a test that needs others sets them before its own dynamic imports.
process.env['NEXTAUTH_SECRET'] ??= 'a secret of the tests, long enough for the check'
process.env['NEXTAUTH_URL'] ??= 'http://127.0.0.1:3000'
process.env['VAPID_PUBLIC_KEY'] ??= 'BA1Hxzyi1RUM1b5wjxsn7nGxAszw2u61m164i3MrAIxHF6YK5h4SDYic-dRuU_RCPCfA5aq9ojSwk5Y2EmClBPs'
process.env['VAPID_PRIVATE_KEY'] ??= 'k'.repeat(43)
process.env['UV_THREADPOOL_SIZE'] ??= '16'
process.env['VAPID_SUBJECT'] ??= 'mailto:shellroom@marramlane.example'

beforeAll(async () => {
  const { database, databaseFile } = await import('@/db/connection')
  const { migrate } = await import('@/db/migrator')
  await migrate(databaseFile())
  return () => database.close()
})
afterAll(() => rmSync(directory, { recursive: true, force: true }))
