import type { StandingBackup } from '@/lib/backups/backup-plan'
import type { Clock } from '@/lib/core/clock'
import { backupDir } from '@/lib/core/env'
import { DamagedBackupError, proveBackup, readManifest } from '@/lib/server/backup-files'
import { Backup, inTransaction } from '@/models'

const ERROR_LIMIT = 500

/**
 * Restores the newest sound copy for a try and writes down whether it would have been a help. One that would not stays in the
 * folder for a look, but counts as none: the next planned copy takes its place.
 *
 * @returns the copy that was tried; null where there is none.
 * @throws {DamagedBackupError} when it failed its proof, after that was written down.
 */
export async function proveNewestBackup(standing: readonly StandingBackup[], { clock }: { clock: Clock }): Promise<string | null> {
  const [newest] = standing.filter(({ isSound }) => isSound).toSorted((one, other) => other.startedAt - one.startedAt)
  const manifest = newest ? await readManifest(backupDir(), newest.fileName) : null
  if (!manifest) return null
  const where = { fileName: manifest.fileName }
  try {
    await proveBackup(backupDir(), manifest)
    await inTransaction(() => Backup.update({ provenAt: clock.now() }, { where }))
    return manifest.fileName
  } catch (error) {
    if (!(error instanceof DamagedBackupError)) throw error
    const words = `The restore for a try failed. ${error.message}`
    await inTransaction(() => Backup.update({ outcome: 'failed', error: words.slice(0, ERROR_LIMIT) }, { where }))
    throw error
  }
}
