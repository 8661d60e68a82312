import { Mutex } from 'async-mutex'
import type { BackupKind } from '@/lib/backups/backup-plan'
import { backupFileName, type BackupManifest } from '@/lib/backups/manifest'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { backupDir } from '@/lib/core/env'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { BackupError, writeBackup, type WriteBackupParts } from '@/lib/server/backup-files'
import { processWide } from '@/lib/server/process-wide'
import { Backup, inTransaction } from '@/models'

const oneAtATime = processWide('backups', () => new Mutex())

/** Names of copies are a second apart, and a key is easily pressed twice. */
const JUST_NOW_MS = 10_000
const ERROR_LIMIT = 500

export type MakeBackupParts = {
  /** Null: Kilnward by its own plan. */
  member: Actor | null
  clock: Clock
  snapshot?: WriteBackupParts['snapshot']
}

/**
 * Makes one copy of the records and writes down how that went. The copying itself is outside of any transaction: others write on.
 *
 * @throws {AppError} unavailable, with the reason, when there is no copy; conflict when one was made a moment ago.
 */
export function makeBackup(kind: BackupKind, { member, clock, snapshot }: MakeBackupParts): Promise<BackupManifest> {
  return oneAtATime.runExclusive(async () => {
    const startedAt = clock.now()
    const newest = await Backup.max<number | null, Backup>('startedAt', { where: { kind, outcome: 'done' } })
    if (newest !== null && Math.abs(startedAt - newest) < JUST_NOW_MS) throw new AppError('conflict', 'A backup was made a moment ago.')
    const id = newId(startedAt)
    const fileName = backupFileName(kind, startedAt)
    await inTransaction(() => Backup.create({ id, fileName, kind, startedAt }))
    try {
      const manifest = await writeBackup({ kind, startedAt, folder: backupDir(), clock, ...(snapshot && { snapshot }) })
      await inTransaction(async () => {
        const { sizeBytes, sha256, finishedAt } = manifest
        await Backup.update({ outcome: 'done', finishedAt, sizeBytes, sha256 }, { where: { id } })
        if (!member) return
        const text = 'A backup was made by hand.'
        await addFoundryEvent({ type: 'backup', id, name: fileName }, { kind: 'backup made', by: member, at: finishedAt, text })
      })
      return manifest
    } catch (error) {
      const words = error instanceof Error ? error.message : String(error)
      await inTransaction(() =>
        Backup.update({ outcome: 'failed', finishedAt: clock.now(), error: words.slice(0, ERROR_LIMIT) }, { where: { id } }),
      )
      if (!(error instanceof BackupError)) throw error
      throw new AppError('unavailable', `No backup was made. ${words}`, {}, { cause: error })
    }
  })
}
