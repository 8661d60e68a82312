import { database, databaseFile } from '@/db/connection'
import { migrate } from '@/db/migrator'
import { env } from '@/lib/core/env'
import { Foundry } from '@/models'

// Run by the start script before anything serves: checks the settings, brings the records up to date, and says what they are.
try {
  env()
  const file = databaseFile()
  const applied = await migrate(file)
  const foundry = await Foundry.findOne()
  await database.close()
  process.stdout.write(`${JSON.stringify({ file, applied, isNew: foundry === null, isDemo: foundry?.isDemo ?? false })}\n`)
} catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`)
  process.exitCode = 1
}
