import { database, databaseFile } from '@/db/connection'
import { migrate, migrationsOf } from '@/db/migrator'
import { systemClock } from '@/lib/core/clock'
import { backupDir, env } from '@/lib/core/env'
import { log } from '@/lib/core/log'
import { writeBackup } from '@/lib/server/backup-files'
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
  await backUpBeforeUpgrade(file)
  const applied = await migrate(file)
  const foundry = await Foundry.findOne()
  return { file, applied, isNew: foundry === null && (await Member.count()) === 0, isDemo: foundry?.isDemo ?? false }
}

/** The list of backups may be one of the tables that are still to come, so the worker writes this one into it later. */
async function backUpBeforeUpgrade(file: string): Promise<void> {
  const { applied, pending } = await migrationsOf(file)
  if (applied.length === 0 || pending.length === 0) return
  const startedAt = systemClock.now()
  try {
    const { fileName } = await writeBackup({ kind: 'before an upgrade', startedAt, folder: backupDir(), clock: systemClock })
    log('backup.made', { fileName, before: pending })
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error)
    throw new Error(`This version changes the records and copies them first, which failed. ${reason}`, { cause: error })
  }
}

/** Closes the handle that stays open for the life of a process. */
export async function closeRecords(): Promise<void> {
  await database.close()
}
