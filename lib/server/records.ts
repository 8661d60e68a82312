import { database, databaseFile } from '@/db/connection'
import { migrate } from '@/db/migrator'
import { env } from '@/lib/core/env'
import { Foundry, Member } from '@/models'

export type Records = {
  file: string
  /** Migrations that were applied now. */
  applied: string[]
  /** Neither a foundry nor a member yet. */
  isNew: boolean
  isDemo: boolean
}

/**
 * Checks the settings, brings the records up to date and says what they are. For the start, before anything serves.
 *
 * @throws {Error} with one line that says what to mend.
 */
export async function bringUpToDate(): Promise<Records> {
  env()
  const file = databaseFile()
  const applied = await migrate(file)
  const foundry = await Foundry.findOne()
  return { file, applied, isNew: foundry === null && (await Member.count()) === 0, isDemo: foundry?.isDemo ?? false }
}

/** Closes the handle that stays open for the life of a process. */
export async function closeRecords(): Promise<void> {
  await database.close()
}
