import { Op } from 'sequelize'
import { backupsToRemove, type StandingBackup } from '@/lib/backups/backup-plan'
import type { BackupManifest } from '@/lib/backups/manifest'
import type { Clock } from '@/lib/core/clock'
import { backupDir, dataDir } from '@/lib/core/env'
import { newId } from '@/lib/core/ids'
import { keepSecrets, listBackupFiles, removeBackupFile, sweepBackupFolder } from '@/lib/server/backup-files'
import { Backup, inTransaction } from '@/models'

const HOUR_MS = 3_600_000
/** Of copies that failed or are gone, the list remembers so much. */
const REMEMBERED_MS = 90 * 24 * HOUR_MS

/**
 * Makes the list of backups agree with the folder, which is what counts: copies that the list does not know (made before an
 * upgrade, or newer than the records that were restored) come in, those whose file is gone are marked so. Then takes away
 * what the plan no longer keeps.
 *
 * @returns the copies that stay.
 */
export async function keepBackups({ clock }: { clock: Clock }): Promise<{ standing: StandingBackup[]; removed: number }> {
  const now = clock.now()
  const folder = backupDir()
  await sweepBackupFolder(folder, now)
  const manifests = await listBackupFiles(folder)
  if (manifests.length > 0) await keepSecrets(dataDir(), folder)
  const standing = await inTransaction(() => agree(manifests, now))
  const leaving = backupsToRemove(standing, now)
  for (const { fileName } of leaving) await removeBackupFile(folder, fileName)
  const gone = new Set(leaving.map(({ fileName }) => fileName))
  if (gone.size > 0) await inTransaction(() => Backup.update({ removedAt: now }, { where: { fileName: [...gone] } }))
  return { standing: standing.filter(({ fileName }) => !gone.has(fileName)), removed: gone.size }
}

async function agree(manifests: readonly BackupManifest[], now: number): Promise<StandingBackup[]> {
  const rows = new Map((await Backup.findAll()).map((row) => [row.fileName, row]))
  const present = new Set(manifests.map(({ fileName }) => fileName))
  for (const { fileName, kind, startedAt, finishedAt, sizeBytes, sha256 } of manifests) {
    const row = rows.get(fileName)
    if (!row) await Backup.create({ id: newId(startedAt), fileName, kind, startedAt, finishedAt, outcome: 'done', sizeBytes, sha256 })
    // The records in a copy know of it only as begun.
    else if (row.outcome === null) await row.update({ finishedAt, outcome: 'done', sizeBytes, sha256 })
    else if (row.removedAt !== null) await row.update({ removedAt: null })
  }
  for (const row of rows.values()) {
    if (present.has(row.fileName)) continue
    if (row.outcome === 'done' && row.removedAt === null) await row.update({ removedAt: now })
    if (row.outcome === null && row.startedAt < now - HOUR_MS) {
      await row.update({ outcome: 'failed', finishedAt: now, error: 'Kilnward was ended before this copy was finished.' })
    }
  }
  const old = { startedAt: { [Op.lt]: now - REMEMBERED_MS } }
  await Backup.destroy({
    where: { ...old, [Op.or]: [{ outcome: 'failed' }, { removedAt: { [Op.ne]: null } }], fileName: { [Op.notIn]: [...present] } },
  })
  return manifests.map(({ fileName, kind, startedAt }) => ({
    fileName,
    kind,
    startedAt,
    isSound: rows.get(fileName)?.outcome !== 'failed',
  }))
}
